/**
 * A code as somebody typed it, in the form that the ledger holds.
 * @returns undefined where it cannot be one.
 */
export function normaliseCode(typed: string): string | undefined {
	const plain = typed.toUpperCase().replace(/[\s\-–—.]/g, '');
	return /^[0-9A-Z]{8}$/.test(plain) ? `${plain.slice(0, 4)}-${plain.slice(4)}` : undefined;
}
