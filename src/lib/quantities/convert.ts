import { parseUnit, sameDimension, type Unit } from './parse-unit';

/** Value in SI of a value in `unit`; temperature scales with their zero point. */
export function toSi(value: number, unit: Unit): number {
	const scaled = (unit.shift === 0 ? value : value + unit.shift) * unit.num;
	return unit.den === 1 ? scaled : scaled / unit.den;
}

/** The inverse of `toSi`. */
export function fromSi(value: number, unit: Unit): number {
	const scaled = (unit.den === 1 ? value : value * unit.den) / unit.num;
	return unit.shift === 0 ? scaled : scaled - unit.shift;
}

/** SI value of a difference or an uncertainty: scaled, never shifted. */
export function differenceToSi(value: number, unit: Unit): number {
	return unit.den === 1 ? value * unit.num : (value * unit.num) / unit.den;
}

/** The inverse of `differenceToSi`. */
export function differenceFromSi(value: number, unit: Unit): number {
	return (unit.den === 1 ? value : value * unit.den) / unit.num;
}

function pair(from: string, to: string): [Unit, Unit] {
	const a = parseUnit(from);
	const b = parseUnit(to);
	if (a === undefined || b === undefined)
		throw new RangeError(`Unknown unit: ${a === undefined ? from : to}`);
	if (!sameDimension(a.dimension, b.dimension)) throw new RangeError(`${from} cannot be expressed in ${to}`);
	return [a, b];
}

/**
 * `value` in the unit `from` expressed in `to`.
 * @throws RangeError for a unit that is not known or not of the same dimension.
 */
export function convert(value: number, from: string, to: string): number {
	if (from === to) return value;
	const [a, b] = pair(from, to);
	return fromSi(toSi(value, a), b);
}

/** As `convert`, for a difference or an uncertainty: 1 degF is 5/9 K, whatever the zero points. */
export function convertDifference(value: number, from: string, to: string): number {
	if (from === to) return value;
	const [a, b] = pair(from, to);
	return differenceFromSi(differenceToSi(value, a), b);
}
