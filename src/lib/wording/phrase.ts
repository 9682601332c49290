/** A sentence with its few distinctions: words that carry the result, and works cited. Plain JSON. */
export type PhrasePart = string | { strong: string } | { cite: string };
export type Phrase = PhrasePart[];

export function strong(text: string): PhrasePart {
	return { strong: text };
}

export function cite(id: string): PhrasePart {
	return { cite: id };
}

/** The words alone; citations are left out with the space before them. */
export function plainText(phrase: Phrase): string {
	let text = '';
	for (const part of phrase) {
		if (typeof part === 'string') text += part;
		else if ('strong' in part) text += part.strong;
		else text = text.replace(/[ \u00a0\u202f]$/, '');
	}
	return text;
}

/** Several phrases as one, with a space between. */
export function joinPhrases(phrases: readonly Phrase[]): Phrase {
	return phrases.flatMap((phrase, i) => (i === 0 ? phrase : [' ', ...phrase]));
}

/** "a", "a and b", "a, b and c". */
export function listed(items: readonly string[], and: string): string {
	if (items.length < 2) return items[0] ?? '';
	return `${items.slice(0, -1).join(', ')} ${and} ${items.at(-1) ?? ''}`;
}

/** First letter in upper case; symbols and names stay as they are. */
export function capitalise(text: string): string {
	return text.charAt(0).toUpperCase() + text.slice(1);
}
