import { convertDifference, decimalsFor } from '../quantities';
import { claimOf, type Rule } from './context';

/** A claim stated to more decimals than its own, or else the result's, uncertainty supports. */
export const digitsBeyondUncertainty: Rule = (context) => {
	const compared = claimOf(context);
	if (compared === undefined) return [];
	const { claim, output } = compared;
	if (claim.decimals === undefined) return [];
	const unit = claim.unit ?? output.unit;
	const own = claim.standardUncertainty;
	const computed = context.outputs[output.id]?.standardUncertainty ?? 0;
	const u = own !== undefined && own > 0 ? own : convertDifference(computed, output.unit, unit);
	const supported = decimalsFor(u);
	if (supported === undefined || claim.decimals <= supported) return [];
	return [
		{
			code: 'digits-beyond-uncertainty',
			level: 'note',
			text: `The number is stated to ${claim.decimals} decimals; ${own !== undefined && own > 0 ? 'its own uncertainty' : 'the uncertainty of the result'} supports ${supported}.`,
			figures: { decimals: claim.decimals, supported, standardUncertainty: u },
			source: 'JCGM 100:2008, 7.2.6.',
			outputs: [output.id]
		}
	];
};
