import type { Rule } from './context';

/** Trials from Student's t with so few degrees of freedom that they have no standard deviation to settle on. */
export const heavyTails: Rule = ({ checked }) => {
	const { model, evaluation } = checked;
	if (evaluation.propagation !== 'monte-carlo') return [];
	return model.columns.flatMap(({ id, domain }) => {
		const spec = model.used[id]?.distribution;
		if (spec?.type !== 'students-t' || spec.degreesOfFreedom > 2) return [];
		// Cut off at both ends it has one.
		if (domain.low !== null && domain.high !== null) return [];
		return [
			{
				code: 'not-converged',
				level: 'caution' as const,
				text: `A t distribution with two degrees of freedom or fewer, as that of ${id}, has no standard deviation: the mean and the standard uncertainty of the trials change with the seed. The ends of the interval do settle.`,
				figures: { degreesOfFreedom: spec.degreesOfFreedom },
				source: 'JCGM 101:2008, 6.4.9.',
				inputs: [id]
			}
		];
	});
};
