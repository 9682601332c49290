import type { DefaultValue, Method, NumberInput, Range } from '../methods/types';
import { differenceFromSi, fromSi, toSi } from '../quantities/convert';
import { parseUnit, type Unit } from '../quantities/parse-unit';
import { displayUnit } from '../quantities';
import { exactly } from '../uncertainty/distributions/exact';
import type { InputColumn } from '../uncertainty/trial-model';
import { distributionAt } from './check-distribution';
import { unitAt } from './check-unit';
import { numberAt, objectAt, pointer, textAt } from './json';
import { ProblemError } from './problem';
import type { InputUsed } from './types';

export interface CheckedInput {
	column: InputColumn;
	used: InputUsed;
	/** Name under which the quantity is drawn once for several inputs. */
	shared?: string;
}

export function ownUnitOf(unit: string): Unit {
	const own = parseUnit(unit);
	if (own === undefined) throw new Error(`The method states an unknown unit: ${unit}`);
	return own;
}

/** A range of the own unit in SI. */
export function rangeInSi(range: Range, own: Unit): Range {
	return {
		...range,
		low: range.low === null ? null : toSi(range.low, own),
		high: range.high === null ? null : toSi(range.high, own)
	};
}

/** "from 0 to 1", "above 0 K", for messages. */
export function describeRange(range: Range, unit: string): string {
	const printed = unit === '' ? '' : ` ${displayUnit(unit)}`;
	const low =
		range.low === null ? '' : `${range.lowOpen === true ? 'above' : 'at least'} ${range.low}${printed}`;
	const high =
		range.high === null ? '' : `${range.highOpen === true ? 'below' : 'at most'} ${range.high}${printed}`;
	return [low, high].filter((part) => part !== '').join(' and ');
}

export function isInside(value: number, { low, high, lowOpen, highOpen }: Range): boolean {
	if (low !== null && (value < low || (lowOpen === true && value === low))) return false;
	return high === null || !(value > high || (highOpen === true && value === high));
}

/** @throws ProblemError if the value, in the own unit, is physically impossible for the input */
export function checkDomain(spec: NumberInput, value: number, path: string): void {
	if (isInside(value, spec.domain)) return;
	throw new ProblemError(
		'outside-domain',
		`The ${spec.name} must be ${describeRange(spec.domain, spec.unit)}.`,
		path
	);
}

/** A numeric input as given. */
export function givenInput(spec: NumberInput, given: unknown, path: string): CheckedInput {
	const entry = objectAt(given, path, ['value', 'unit', 'distribution', 'shared', 'from']);
	const own = ownUnitOf(spec.unit);
	const unit = unitAt(entry.unit, pointer(path, 'unit'), spec.unit);
	const valuePath = pointer(path, 'value');
	const value = numberAt(entry.value, valuePath);
	const si = toSi(value, unit);
	const inOwn = unit === own ? value : fromSi(si, own);
	if (!Number.isFinite(si) || !Number.isFinite(inOwn)) {
		throw new ProblemError(
			'not-finite',
			'In its own unit the number is too large to compute with.',
			valuePath
		);
	}
	checkDomain(spec, inOwn, valuePath);
	const { distribution, degreesOfFreedom, listed } = distributionAt(
		entry.distribution,
		pointer(path, 'distribution'),
		value,
		unit,
		own
	);
	const used: InputUsed = { value: inOwn, unit: spec.unit, given: true };
	if (distribution.standardUncertainty > 0) {
		used.standardUncertainty =
			unit === own && listed?.type === 'normal'
				? listed.standardUncertainty
				: differenceFromSi(distribution.standardUncertainty, own);
	}
	if (listed !== undefined && listed.type !== 'exact') used.distribution = listed;
	const shared = entry.shared === undefined ? undefined : textAt(entry.shared, pointer(path, 'shared'), 100);
	return {
		column: {
			id: spec.id,
			path,
			value: si,
			distribution,
			degreesOfFreedom,
			domain: rangeInSi(spec.domain, own)
		},
		used,
		shared
	};
}

/** Where a default comes from, as the result says it: the citation's text instead of its id. */
function sourceText(method: Method, { source }: DefaultValue): string {
	return method.citations.find(({ id }) => id === source)?.text ?? source;
}

/** An input left out, at its default. */
export function defaultInput(
	method: Method,
	spec: NumberInput,
	chosen: DefaultValue,
	path: string
): CheckedInput {
	const own = ownUnitOf(spec.unit);
	const value = Number(chosen.value);
	const si = toSi(value, own);
	return {
		column: {
			id: spec.id,
			path,
			value: si,
			distribution: exactly(si),
			degreesOfFreedom: Infinity,
			domain: rangeInSi(spec.domain, own)
		},
		used: { value, unit: spec.unit, given: false, source: sourceText(method, chosen) }
	};
}
