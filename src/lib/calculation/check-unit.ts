import { parseUnit, sameDimension, type Unit } from '../quantities/parse-unit';
import { displayUnit } from '../quantities';
import { quoted, textAt } from './json';
import { ProblemError } from './problem';

/** The unit named in the request, or the own one if none is; it must be of the own unit's dimension. */
export function unitAt(value: unknown, path: string, ownUnit: string): Unit {
	const own = parseUnit(ownUnit);
	if (own === undefined) throw new Error(`The method states an unknown unit: ${ownUnit}`);
	if (value === undefined) return own;
	const text = textAt(value, path, 80);
	const unit = parseUnit(text);
	if (unit === undefined) {
		throw new ProblemError('unknown-unit', `The unit ${quoted(text)} is not known.`, path);
	}
	if (!sameDimension(unit.dimension, own.dimension)) {
		const wanted =
			ownUnit === '' ? 'a pure number (no unit, % or the like)' : `a unit such as ${displayUnit(ownUnit)}`;
		throw new ProblemError(
			'wrong-dimension',
			`${quoted(text)} does not fit here: ${wanted} is expected.`,
			path
		);
	}
	return unit;
}

/** Every text in the request that may be a unit, so that unusual ones can be loaded before the check. */
export function unitTexts(value: unknown, depth = 0): string[] {
	if (typeof value !== 'object' || value === null || depth > 12) return [];
	const texts: string[] = [];
	for (const [key, inner] of Object.entries(value)) {
		if (key === 'unit' && typeof inner === 'string') texts.push(inner);
		else texts.push(...unitTexts(inner, depth + 1));
	}
	return texts;
}
