import { randomBytes } from 'node:crypto';

const letters = '0123456789ABCDEFGHIJKLMNOPQRSTUVWXYZabcdefghijklmnopqrstuvwxyz';

/** @param length of letters and digits that nobody can guess */
export function randomText(length: number): string {
	// 248 is the largest multiple of 62 below 256: what lies above would make some letters more frequent.
	let text = '';
	while (text.length < length) {
		for (const byte of randomBytes(length * 2)) {
			if (byte < 248 && text.length < length) text += letters.charAt(byte % 62);
		}
	}
	return text;
}

/** @param prefix as in `cus` for customers @returns an id like `cus_…` */
export function newId(prefix: string): string {
	const long = prefix === 'cs_test' ? 58 : prefix === 'cus' || prefix === 'prod' ? 14 : 24;
	return `${prefix}_${randomText(long)}`;
}
