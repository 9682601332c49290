import { differenceFromSi, differenceToSi, fromSi, toSi } from '../quantities/convert';
import type { Unit } from '../quantities/parse-unit';
import { distributionFamily } from '../uncertainty/distributions';
import { exactly } from '../uncertainty/distributions/exact';
import { parameterKinds, type Distribution, type Parameters } from '../uncertainty/distributions/types';
import { isPlainObject, numberAt, objectAt, pointer, quoted, textAt, type PlainObject } from './json';
import { ProblemError } from './problem';
import type { DistributionSpec } from './types';

export interface CheckedDistribution {
	/** In SI. */
	distribution: Distribution;
	degreesOfFreedom: number;
	/** In the own unit, as the result lists it. */
	listed?: DistributionSpec;
}

function parameterAt(given: PlainObject, name: string, path: string): number | number[] {
	const at = pointer(path, name);
	const kind = parameterKinds[name];
	if (kind !== 'points' && kind !== 'pures') return numberAt(given[name], at);
	const value = given[name];
	if (!Array.isArray(value) || value.length > 10_000) {
		throw new ProblemError('wrong-type', 'A list of at most 10 000 numbers is expected.', at);
	}
	return value.map((entry, i) => numberAt(entry, pointer(at, i)));
}

function convertParameters(
	parameters: Parameters,
	point: (x: number) => number,
	difference: (x: number) => number
): Record<string, number | number[]> {
	const converted: Record<string, number | number[]> = {};
	for (const [name, value] of Object.entries(parameters)) {
		const kind = parameterKinds[name];
		if (typeof value !== 'number') converted[name] = kind === 'points' ? value.map(point) : [...value];
		else
			converted[name] = kind === 'point' ? point(value) : kind === 'difference' ? difference(value) : value;
	}
	return converted;
}

/** A distribution as given, in the given unit, checked and built in SI about the value. */
export function distributionAt(
	given: unknown,
	path: string,
	value: number,
	unit: Unit,
	ownUnit: Unit
): CheckedDistribution {
	const si = toSi(value, unit);
	if (given === undefined) return { distribution: exactly(si), degreesOfFreedom: Infinity };
	if (!isPlainObject(given)) {
		throw new ProblemError('wrong-type', 'A distribution is an object with a type.', path);
	}
	const type = textAt(given.type, pointer(path, 'type'), 60);
	const family = distributionFamily(type);
	if (family === undefined) {
		throw new ProblemError(
			'unknown-distribution',
			`There is no distribution ${quoted(type)}.`,
			pointer(path, 'type')
		);
	}
	const names = Object.keys(given).filter((key) => key !== 'type');
	const way =
		family.ways.find(
			(set) => set.length > 0 && set.some((name) => names.includes(name) && name !== 'degreesOfFreedom')
		) ??
		family.ways[0] ??
		[];
	objectAt(given, path, ['type', ...way, 'degreesOfFreedom']);
	const parameters = Object.fromEntries(way.map((name) => [name, parameterAt(given, name, path)]));
	const degreesPath = pointer(path, 'degreesOfFreedom');
	const degrees =
		given.degreesOfFreedom === undefined ? Infinity : numberAt(given.degreesOfFreedom, degreesPath);
	if (!(degrees > 0)) {
		throw new ProblemError('outside-domain', 'Degrees of freedom must lie above zero.', degreesPath);
	}
	// Faults are looked for in the unit as given, so that a message speaks of the numbers that were typed; what
	// depends on the zero point (lognormal, exponential) is looked for in SI as well.
	const inSi = convertParameters(
		parameters,
		(x) => toSi(x, unit),
		(x) => differenceToSi(x, unit)
	);
	const shifted = unit.shift !== 0 && way.every((name) => parameterKinds[name] === 'pure');
	const fault = shifted ? family.fault(inSi, si) : family.fault(parameters, value);
	if (fault !== undefined) {
		throw new ProblemError(
			'bad-distribution',
			fault.parameter === 'type'
				? `A distribution of type ${fault.message}.`
				: `${fault.parameter} ${fault.message}.`,
			pointer(path, fault.parameter)
		);
	}
	const listed = {
		type,
		...convertParameters(
			inSi,
			(x) => fromSi(x, ownUnit),
			(x) => differenceFromSi(x, ownUnit)
		),
		...(unit === ownUnit ? parameters : {}),
		...(given.degreesOfFreedom === undefined ? {} : { degreesOfFreedom: degrees })
	} as DistributionSpec;
	const distribution = family.build(inSi, si);
	if (!Number.isFinite(distribution.standardUncertainty)) {
		throw new ProblemError(
			'bad-distribution',
			'So wide a distribution has no standard uncertainty that can be computed with. Narrow it.',
			path
		);
	}
	return { distribution, degreesOfFreedom: degrees, listed };
}
