import type { Rule } from './context';

/** Correlations that have no effect because an input has no uncertainty or none is propagated. */
export const correlationIgnored: Rule = ({ checked }) => {
	const { correlations, evaluation, model } = checked;
	const uncertain = new Set(
		model.columns.filter(({ distribution }) => distribution.standardUncertainty > 0).map(({ id }) => id)
	);
	return correlations
		.filter(
			({ a, b, coefficient }) =>
				coefficient !== 0 && (evaluation.propagation === 'none' || !uncertain.has(a) || !uncertain.has(b))
		)
		.map(({ a, b, coefficient }) => ({
			code: 'correlation-ignored',
			level: 'note',
			text: `The correlation between ${a} and ${b} has no effect: ${evaluation.propagation === 'none' ? 'no uncertainty is propagated' : `${uncertain.has(a) ? b : a} is given without uncertainty`}.`,
			figures: { coefficient },
			source: 'JCGM 100:2008, 5.2.',
			inputs: [a, b]
		}));
};
