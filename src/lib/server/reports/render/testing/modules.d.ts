/* Part used of a library that ships no types of its own. */
declare module 'jsdom' {
	export class JSDOM {
		constructor(markup: string, options?: { contentType?: string });
		readonly window: { readonly document: Document };
	}
}
