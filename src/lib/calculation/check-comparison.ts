import type { Method } from '../methods/types';
import { isOutput } from './check-evaluation';
import { unitAt } from './check-unit';
import { choiceAt, isPlainObject, numberAt, objectAt, pointer, quoted, textAt } from './json';
import { ProblemError } from './problem';
import type { Area, Comparison, LimitComparison, Period, TemperatureKind } from './types';

const areas: readonly Area[] = ['point', 'sunlit-hemisphere', 'whole-sphere', 'site', 'not-stated'];
const periods: readonly Period[] = ['instant', 'day', 'year', 'orbit', 'not-stated'];
const kinds: readonly TemperatureKind[] = [
	'effective',
	'equilibrium',
	'skin',
	'radiometric',
	'air-2m',
	'not-stated'
];

function outputAt(method: Method, value: unknown, path: string): string {
	const id = textAt(value, path, 200);
	if (!isOutput(method, id)) {
		throw new ProblemError('unknown-output', `${method.id} has no output ${quoted(id)}.`, path);
	}
	return id;
}

/** What the result is to be compared with; checked for form, the unit when the output's unit is known. */
export function comparisonAt(method: Method, given: unknown, path: string): Comparison | undefined {
	if (given === undefined) return undefined;
	if (!isPlainObject(given)) throw new ProblemError('wrong-type', 'A comparison is an object.', path);
	const at = (key: string) => pointer(path, key);
	const kind = choiceAt(given.kind, at('kind'), ['claim', 'limit']);
	const allowed =
		kind === 'claim'
			? [
					'kind',
					'value',
					'unit',
					'standardUncertainty',
					'output',
					'area',
					'period',
					'temperatureKind',
					'decimals',
					'citation'
				]
			: ['kind', 'value', 'unit', 'output', 'sense', 'rule', 'source'];
	objectAt(given, path, allowed);
	numberAt(given.value, at('value'));
	const output = outputAt(method, given.output, at('output'));
	const spec = method.outputs.find(({ id }) => id === output);
	if (spec !== undefined) unitAt(given.unit, at('unit'), spec.unit);
	if (kind === 'limit') {
		choiceAt(given.sense, at('sense'), ['at-most', 'at-least']);
		checkRule(given.rule, at('rule'));
		if (given.source !== undefined) textAt(given.source, at('source'), 5000);
		return given as unknown as LimitComparison;
	}
	if (
		given.standardUncertainty !== undefined &&
		numberAt(given.standardUncertainty, at('standardUncertainty')) < 0
	) {
		throw new ProblemError(
			'outside-domain',
			'A standard uncertainty is not negative.',
			at('standardUncertainty')
		);
	}
	if (given.area !== undefined) choiceAt(given.area, at('area'), areas);
	if (given.period !== undefined) choiceAt(given.period, at('period'), periods);
	if (given.temperatureKind !== undefined) choiceAt(given.temperatureKind, at('temperatureKind'), kinds);
	if (given.decimals !== undefined) {
		const decimals = numberAt(given.decimals, at('decimals'));
		if (!Number.isInteger(decimals) || decimals < -12 || decimals > 12) {
			throw new ProblemError('outside-domain', 'Decimals are a whole number from -12 to 12.', at('decimals'));
		}
	}
	if (given.citation !== undefined) textAt(given.citation, at('citation'), 5000);
	return given as unknown as Comparison;
}

function checkRule(value: unknown, path: string): void {
	if (!isPlainObject(value)) {
		throw new ProblemError('wrong-type', 'A decision rule is an object with a type.', path);
	}
	const type = choiceAt(value.type, pointer(path, 'type'), ['simple-acceptance', 'guard-band']);
	objectAt(value, path, type === 'guard-band' ? ['type', 'risk'] : ['type']);
	if (type !== 'guard-band') return;
	const risk = numberAt(value.risk, pointer(path, 'risk'));
	if (!(risk >= 0.0001 && risk < 0.5)) {
		throw new ProblemError(
			'outside-domain',
			'The risk must lie from 0.0001 to below 0.5.',
			pointer(path, 'risk')
		);
	}
}
