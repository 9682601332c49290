import temml from 'temml';

/** Same text, same markup: a page shows the same few symbols over and over. */
const made = new Map<string, string>();
const mostKept = 2000;

/**
 * TeX as MathML, for pages. Only the methods' own equations and numbers are given to it, never a reader's text; links,
 * HTML and further styles are off all the same.
 * @param display in a line of its own, not within a sentence
 * @throws Error that quotes the TeX where a macro or a brace in it is wrong: a broken equation is never shown.
 */
export function texToMathml(tex: string, display: boolean): string {
	const key = `${display ? 'd' : 't'}${tex}`;
	const kept = made.get(key);
	if (kept !== undefined) return kept;
	let mathml: string;
	try {
		mathml = temml.renderToString(tex, {
			displayMode: display,
			throwOnError: true,
			strict: true,
			trust: false,
			maxExpand: 100
		});
	} catch (cause) {
		throw new Error(`This equation cannot be typeset: ${tex}`, { cause });
	}
	if (made.size >= mostKept) made.clear();
	made.set(key, mathml);
	return mathml;
}
