/**
 * A typed text as a database and JSON can hold it: without NUL characters and halves of surrogate pairs. Neither is
 * visible, so nothing that anybody wrote is lost; they come in by pasting from damaged files.
 */
export function storable(text: string): string {
	return text.replaceAll('\0', '').replace(/\p{Cs}/gu, '');
}
