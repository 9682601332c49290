import { differenceFromSi, fromSi } from '../quantities/convert';
import type { FirstOrderOutput } from '../uncertainty/first-order';
import type { MonteCarloOutcome } from '../uncertainty/monte-carlo';
import { ownUnitOf } from './check-input';
import type { CheckedRequest } from './check-request';
import { coefficientInUnits } from './model';
import type { OutputResult, SensitivityEntry } from './types';

/** What propagation gave, in SI. */
export interface Propagated {
	values: Record<string, number>;
	linear?: Record<string, FirstOrderOutput>;
	trials?: MonteCarloOutcome;
	/** The trials that the linear form is checked against. */
	check?: MonteCarloOutcome;
	/** Every input is exact. */
	exact?: boolean;
}

function sensitivities(
	{ model }: CheckedRequest,
	linear: FirstOrderOutput | undefined,
	unit: string
): Record<string, SensitivityEntry> | undefined {
	if (linear === undefined) return undefined;
	const own = ownUnitOf(unit);
	const uncertainty = differenceFromSi(linear.standardUncertainty, own);
	const entries: Record<string, SensitivityEntry> = {};
	for (const { id, distribution } of model.columns) {
		const slope = linear.coefficients[id];
		if (slope === undefined) continue;
		const contribution = differenceFromSi(Math.abs(slope) * distribution.standardUncertainty, own);
		const ratio = uncertainty > 0 ? contribution / uncertainty : 0;
		entries[id] = {
			coefficient: coefficientInUnits(slope, model.unitOf.get(id) ?? '', unit),
			contribution,
			share: ratio * ratio
		};
	}
	return entries;
}

/** The outputs in their own units. */
export function listOutputs(
	checked: CheckedRequest,
	ids: readonly string[],
	{ values, linear, trials, exact }: Propagated
): Record<string, OutputResult> {
	const { model, evaluation } = checked;
	const { coverage } = evaluation;
	const results: Record<string, OutputResult> = {};
	for (const { id, unit } of model.outputs) {
		if (!ids.includes(id)) continue;
		const own = ownUnitOf(unit);
		const value = fromSi(values[id] as number, own);
		const result: OutputResult = { value, unit };
		const statistics = trials?.outputs[id];
		const first = linear?.[id];
		if (exact === true) {
			if (evaluation.propagation === 'monte-carlo') result.mean = value;
			result.standardUncertainty = 0;
			result.interval = { low: value, high: value, coverage };
			result.sensitivity = {};
		} else if (statistics !== undefined) {
			result.mean = fromSi(statistics.mean, own);
			result.standardUncertainty = differenceFromSi(statistics.standardUncertainty, own);
			result.interval = {
				low: fromSi(statistics.interval.low, own),
				high: fromSi(statistics.interval.high, own),
				coverage
			};
		} else if (first !== undefined) {
			result.standardUncertainty = differenceFromSi(first.standardUncertainty, own);
			if (Number.isFinite(first.effectiveDegreesOfFreedom)) {
				result.effectiveDegreesOfFreedom = first.effectiveDegreesOfFreedom;
			}
			result.interval = {
				low: fromSi(first.interval.low, own),
				high: fromSi(first.interval.high, own),
				coverage
			};
		}
		const sensitivity = sensitivities(checked, first, unit);
		if (sensitivity !== undefined) result.sensitivity = sensitivity;
		results[id] = result;
	}
	return results;
}
