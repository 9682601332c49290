/**
 * Which one form of the reading page is open: a remark on a line, an answer to a remark, or a figure beside a result.
 * It stands in the address, so that it opens without script and the way back closes it.
 */
export interface OpenForm {
	kind: 'remark' | 'answer' | 'figure';
	/** Place of the line, or id of the remark. */
	at: string;
}

const kinds = ['remark', 'answer', 'figure'] as const;

/** Reads the address; null where no form is asked for. */
export function openFormOf(query: URLSearchParams): OpenForm | null {
	for (const kind of kinds) {
		const at = query.get(kind);
		if (at !== null && at !== '') return { kind, at };
	}
	return null;
}

/** Address, relative to the page, at which a form is open and in sight. */
export function openFormHref({ kind, at }: OpenForm): string {
	return `?${kind}=${encodeURIComponent(at)}#form`;
}

/** Id of a line's element. A place has characters that an address would change, so they are replaced one for one. */
export function lineId(place: string): string {
	return `line-${place.replace(/[^A-Za-z0-9-]/g, '_')}`;
}
