import { parseUnit } from './parse-unit';

const raised: Record<string, string> = {
	'0': '⁰',
	'1': '¹',
	'2': '²',
	'3': '³',
	'4': '⁴',
	'5': '⁵',
	'6': '⁶',
	'7': '⁷',
	'8': '⁸',
	'9': '⁹',
	'-': '⁻',
	'.': '·'
};

/** `4` as `⁴`, `-2` as `⁻²`. */
export function superscript(exponent: number): string {
	return [...String(exponent)].map((character) => raised[character] ?? character).join('');
}

/** A unit as it is printed: `W/m^2` as "W m⁻²", `degC` as "°C", `''` as ''. An unknown unit is returned as typed. */
export function displayUnit(unit: string): string {
	const parsed = parseUnit(unit);
	if (parsed === undefined) return unit;
	return parsed.factors
		.map(({ text, exponent }) => (exponent === 1 ? text : text + superscript(exponent)))
		.join('\u00a0');
}

/** A unit in TeX: `W/m^2` as `\mathrm{W}\,\mathrm{m}^{-2}`. */
export function texUnit(unit: string): string {
	const parsed = parseUnit(unit);
	if (parsed === undefined) return unit === '' ? '' : `\\mathrm{${unit.replace(/[^A-Za-z0-9 /()-]/g, '')}}`;
	return parsed.factors
		.map(({ tex, exponent }) => (exponent === 1 ? tex : `${tex}^{${exponent}}`))
		.join('\\,');
}
