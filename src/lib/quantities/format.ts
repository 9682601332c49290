import { displayUnit, superscript, texUnit } from './display-unit';

const minus = '\u2212';
const groupSpace = '\u202f';
const unitSpace = '\u00a0';

function group(digits: string, space: string): string {
	if (digits.length < 5) return digits;
	return digits.replace(/\B(?=(\d{3})+(?!\d))/g, space);
}

/** Digits of `value` at `decimals` places, halves away from zero; `decimals` below zero rounds to tens, hundreds. */
function digitsAt(value: number, decimals: number): { negative: boolean; whole: string; fraction: string } {
	let size = Math.abs(value);
	if (decimals < 0) {
		let step = 1;
		for (let i = decimals; i < 0; i++) step *= 10;
		size = Math.round(size / step) * step;
	}
	const text = size < 1e21 ? size.toFixed(Math.min(100, Math.max(0, decimals))) : BigInt(size).toString();
	const [whole = '0', fraction = ''] = text.split('.');
	return { negative: value < 0 && /[1-9]/.test(text), whole, fraction };
}

/**
 * A number for reading: `decimals` places with trailing zeros kept, a real minus sign, narrow no-break spaces
 * between thousands from five digits on. A value that rounds to zero carries no sign.
 */
export function formatNumber(value: number, decimals: number): string {
	if (!Number.isFinite(value)) return String(value);
	const { negative, whole, fraction } = digitsAt(value, decimals);
	return (negative ? minus : '') + group(whole, groupSpace) + (fraction === '' ? '' : `.${fraction}`);
}

/** The same in TeX. */
export function texNumber(value: number, decimals: number): string {
	const { negative, whole, fraction } = digitsAt(value, decimals);
	return (negative ? '-' : '') + group(whole, '\\,') + (fraction === '' ? '' : `.${fraction}`);
}

interface Significant {
	/** Decimal places, where the number is written out. */
	decimals: number;
	/** Mantissa and power of ten, where it is not. */
	scientific?: { mantissa: number; decimals: number; exponent: number };
}

/** At most `digits` significant digits, no trailing zeros; power of ten outside 1e-4 to 1e9. */
function significant(value: number, digits: number): Significant {
	if (value === 0 || !Number.isFinite(value)) return { decimals: 0 };
	const [mantissaText = '0', exponentText = '0'] = value.toExponential(digits - 1).split('e');
	const exponent = Number(exponentText);
	const mantissa = Number(mantissaText);
	const used = String(Math.abs(mantissa)).replace('.', '').length;
	if (exponent < -4 || exponent >= 9) {
		return { decimals: 0, scientific: { mantissa, decimals: used - 1, exponent } };
	}
	return { decimals: used - 1 - exponent };
}

/** A number to at most `digits` significant digits, for a value that has no uncertainty to round it by. */
export function formatSignificant(value: number, digits = 6): string {
	const { decimals, scientific } = significant(value, digits);
	if (scientific === undefined) return formatNumber(value, Math.max(decimals, 0));
	return `${formatNumber(scientific.mantissa, scientific.decimals)}${unitSpace}×${unitSpace}10${superscript(scientific.exponent)}`;
}

/** The same in TeX. */
export function texSignificant(value: number, digits = 6): string {
	const { decimals, scientific } = significant(value, digits);
	if (scientific === undefined) return texNumber(value, Math.max(decimals, 0));
	return `${texNumber(scientific.mantissa, scientific.decimals)}\\times 10^{${scientific.exponent}}`;
}

/** Space between a number and its unit: none before a degree of angle, narrow before %, else no-break. */
function between(unit: string): string {
	return unit === '' || unit === '°' ? '' : unit === '%' ? groupSpace : unitSpace;
}

/** A formatted number with its unit: `formatWithUnit(311.1, 1, 'K')` is "311.1 K". */
export function formatWithUnit(value: number, decimals: number, unit: string): string {
	const printed = displayUnit(unit);
	return formatNumber(value, decimals) + between(printed) + printed;
}

/** Attaches a unit to a number that is already formatted. */
export function attachUnit(number: string, unit: string): string {
	const printed = displayUnit(unit);
	return number + between(printed) + printed;
}

/** A number already in TeX with its unit in TeX. */
export function texWithUnit(number: string, unit: string): string {
	const printed = texUnit(unit);
	if (printed === '') return number;
	return unit === 'deg' ? number + printed : `${number}\\,${printed}`;
}
