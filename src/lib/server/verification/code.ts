import { randomInt } from 'node:crypto';

/** Digits and capitals that no reader takes for another: no 0, O, 1, I, L or U. */
const alphabet = '23456789ABCDEFGHJKMNPQRSTVWXYZ';

/** A new report's code, such as 8KQ2-7MTR: one of 6.5e11, to be unique in the ledger. */
export function newReportCode(): string {
	const characters = Array.from({ length: 8 }, () => alphabet.charAt(randomInt(alphabet.length)));
	return `${characters.slice(0, 4).join('')}-${characters.slice(4).join('')}`;
}

/**
 * A code as somebody typed it, in the form that the ledger holds.
 * @returns undefined where it cannot be one.
 */
export function normaliseCode(typed: string): string | undefined {
	const plain = typed.toUpperCase().replace(/[\s\-–—.]/g, '');
	return /^[0-9A-Z]{8}$/.test(plain) ? `${plain.slice(0, 4)}-${plain.slice(4)}` : undefined;
}
