/*
 * Answers to remarks stand in the report's own form, beside the fields that they are about, and are saved with it: one
 * button, and nothing typed is lost.
 */
const prefix = 'answer-';

/** Name and id of the field for the answer to a remark. */
export function answerField(remarkId: string): string {
	return `${prefix}${remarkId}`;
}

/** Answers that were typed, by the remark that they answer; those left empty are none. */
export function answersIn(form: FormData): { commentId: string; body: string }[] {
	return [...form].flatMap(([name, value]) => {
		if (!name.startsWith(prefix) || typeof value !== 'string' || value.trim() === '') return [];
		return [{ commentId: name.slice(prefix.length), body: value.replace(/\r\n/g, '\n') }];
	});
}

/** What a form that came back with faults had in its answers. */
export function typedAnswers(values: Readonly<Record<string, string>> | undefined): Record<string, string> {
	return Object.fromEntries(
		Object.entries(values ?? {}).flatMap(([name, text]) =>
			name.startsWith(prefix) ? [[name.slice(prefix.length), text]] : []
		)
	);
}
