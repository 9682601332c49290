/** How a typed number was read, or why it could not be. */
export type ParsedNumber = { ok: true; value: number } | { ok: false; reason: string };

const spaces = /[\s\u00a0\u2009\u202f']/g;

/**
 * Reads a number as people type it: decimal point or decimal comma, groups of three by spaces, points or commas,
 * real minus sign, exponent with e. Refuses what could mean two numbers ("1,361") instead of guessing.
 * @param text as typed
 * @returns the value, or the reason in words that say what to write instead
 */
export function parseNumber(text: string): ParsedNumber {
	let s = text.trim().replace(/\u2212/g, '-');
	if (s === '') return { ok: false, reason: 'Enter a number.' };
	if (/\d[\s\u00a0\u2009\u202f']+\d/.test(s)) {
		if (!/^[+-]?\d{1,3}([\s\u00a0\u2009\u202f']\d{3})+([.,]\d+)?$/.test(s)) {
			return { ok: false, reason: `“${text}” is not a number. Write it with digits, such as 1361.5.` };
		}
		s = s.replace(spaces, '');
		// A space already marks the groups, so the comma can only be the decimal sign.
		s = s.replace(',', '.');
	}
	const commas = s.split(',').length - 1;
	const points = s.split('.').length - 1;
	if (commas === 1 && points === 0) {
		if (/^[+-]?[1-9]\d{0,2},\d{3}$/.test(s)) {
			const [whole = '', rest = ''] = s.split(',');
			return {
				ok: false,
				reason: `“${text}” could be ${whole}.${rest} or ${whole}${rest}. Write it with a point or without a comma.`
			};
		}
		s = s.replace(',', '.');
	} else if (commas > 0 && points > 0) {
		const decimalIsComma = s.lastIndexOf(',') > s.lastIndexOf('.');
		const grouped = decimalIsComma ? /^[+-]?\d{1,3}(\.\d{3})+,\d+$/ : /^[+-]?\d{1,3}(,\d{3})+\.\d+$/;
		if (!grouped.test(s)) {
			return {
				ok: false,
				reason: `“${text}” mixes points and commas. Write it with digits, such as 1361.5.`
			};
		}
		s = decimalIsComma ? s.replace(/\./g, '').replace(',', '.') : s.replace(/,/g, '');
	} else if (commas > 1 || points > 1) {
		const grouped = commas > 1 ? /^[+-]?\d{1,3}(,\d{3})+$/ : /^[+-]?\d{1,3}(\.\d{3})+$/;
		if (!grouped.test(s)) {
			return { ok: false, reason: `“${text}” is not a number. Write it with digits, such as 1361.5.` };
		}
		s = s.replace(/[.,]/g, '');
	}
	if (!/^[+-]?(\d+\.?\d*|\.\d+)(e[+-]?\d{1,3})?$/i.test(s)) {
		return { ok: false, reason: `“${text}” is not a number. Write it with digits, such as 1361.5.` };
	}
	const value = Number(s);
	if (!Number.isFinite(value)) return { ok: false, reason: `“${text}” is too large a number.` };
	return { ok: true, value };
}

/** Reads a list of numbers apart by semicolons or spaces; commas stay decimal signs. */
export function parseNumbers(text: string): { ok: true; values: number[] } | { ok: false; reason: string } {
	const parts = text.split(/[;\s]+/).filter((part) => part !== '');
	if (parts.length === 0) return { ok: false, reason: 'Enter numbers, apart by semicolons.' };
	const values: number[] = [];
	for (const part of parts) {
		const parsed = parseNumber(part);
		if (!parsed.ok) return parsed;
		values.push(parsed.value);
	}
	return { ok: true, values };
}
