import { differenceFromSi, fromSi } from '../quantities/convert';
import { ownUnitOf } from '../calculation/check-input';
import { numericalTolerance } from '../uncertainty/monte-carlo';
import { normalQuantile } from '../uncertainty/special/normal';
import { exp } from '../exact';
import type { Rule } from './context';

/** Standard error of the end of an equal-tailed interval read off trials, in standard uncertainties. */
function noise(coverage: number, trials: number): number {
	const tail = (1 - coverage) / 2;
	const z = normalQuantile(tail);
	const density = exp((-z * z) / 2) / 2.5066282746310002;
	return Math.sqrt((tail * (1 - tail)) / trials) / density;
}

/**
 * The first-order interval and that of the trials differ by more than half a unit of the second digit of the standard
 * uncertainty (JCGM 101:2008, clause 8), and by more than the trials' own scatter.
 */
export const linearPropagationDoubtful: Rule = ({ checked, propagated }) => {
	const { linear, check } = propagated;
	if (linear === undefined || check === undefined) return [];
	const scatter = 4 * noise(checked.evaluation.coverage, check.trials);
	const k = normalQuantile((1 + checked.evaluation.coverage) / 2);
	const doubtful: string[] = [];
	const figures: Record<string, number> = {};
	for (const { id, unit } of checked.model.outputs) {
		const first = linear[id];
		const sampled = check.outputs[id];
		if (first === undefined || sampled === undefined || first.standardUncertainty === 0) continue;
		const tolerance = numericalTolerance(first.standardUncertainty, 2);
		const allowed = Math.max(tolerance, scatter * first.standardUncertainty);
		// Degrees of freedom widen the linear interval alone where the trials draw from normal distributions.
		const reaches = [(first.interval.high - first.interval.low) / 2, k * first.standardUncertainty];
		const fits = reaches.some(
			(reach) =>
				Math.abs(first.value - reach - sampled.symmetric.low) <= allowed &&
				Math.abs(first.value + reach - sampled.symmetric.high) <= allowed
		);
		if (fits) continue;
		doubtful.push(id);
		const own = ownUnitOf(unit);
		figures[`${id}.linearLow`] = fromSi(first.interval.low, own);
		figures[`${id}.linearHigh`] = fromSi(first.interval.high, own);
		figures[`${id}.trialsLow`] = fromSi(sampled.symmetric.low, own);
		figures[`${id}.trialsHigh`] = fromSi(sampled.symmetric.high, own);
		figures[`${id}.tolerance`] = differenceFromSi(tolerance, own);
	}
	if (doubtful.length === 0) return [];
	return [
		{
			code: 'linear-propagation-doubtful',
			level: checked.evaluation.propagation === 'first-order' ? 'caution' : 'note',
			text: 'The linear propagation of uncertainty and the trials give different intervals. The interval of the trials holds; the shares of the uncertainty are a guide only.',
			figures,
			source: 'JCGM 101:2008, clause 8.',
			outputs: doubtful
		}
	];
};
