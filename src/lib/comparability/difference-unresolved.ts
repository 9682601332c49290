import { formatWithUnit, decimalsFor } from '../quantities';
import { normalQuantile } from '../uncertainty/special/normal';
import { estimateOf, type Rule } from './context';

/** A difference smaller than its expanded uncertainty: neither shown nor excluded. */
export const differenceUnresolved: Rule = ({ outputs, checked }) => {
	const difference = outputs.temperatureDifference;
	const u = difference?.standardUncertainty;
	if (difference === undefined || u === undefined || u === 0) return [];
	const expanded = u * normalQuantile((1 + checked.evaluation.coverage) / 2);
	const value = estimateOf(difference);
	if (Math.abs(value) >= expanded) return [];
	const decimals = decimalsFor(u) ?? 1;
	return [
		{
			code: 'difference-unresolved',
			level: 'caution',
			text: `The difference of ${formatWithUnit(value, decimals, 'K')} is smaller than its expanded uncertainty of ${formatWithUnit(expanded, decimals, 'K')}: it may as well be zero, and that is no proof that it is.`,
			figures: { temperatureDifference: value, expandedUncertainty: expanded },
			source: 'JCGM 100:2008, clause 6.',
			outputs: ['temperatureDifference']
		}
	];
};
