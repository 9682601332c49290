import { formatNumber } from '../quantities';
import type { Rule } from './context';

/** Fewer trials than the interval needs for two stable digits, or adaptive trials that ended at their cap. */
export const notConverged: Rule = ({ checked, propagated }) => {
	const outcome = propagated.trials;
	if (outcome === undefined || outcome.converged) return [];
	const adaptive = checked.evaluation.trials === 'adaptive';
	return [
		{
			code: 'not-converged',
			level: adaptive ? 'caution' : 'note',
			text: adaptive
				? `After ${formatNumber(outcome.trials, 0)} trials the figures still move by more than half a unit of their last digit.`
				: `${formatNumber(outcome.trials, 0)} trials are few for this coverage; the last digit of the interval may change with the seed.`,
			figures: { trials: outcome.trials },
			source: adaptive ? 'JCGM 101:2008, 7.9.' : 'JCGM 101:2008, 7.2.'
		}
	];
};
