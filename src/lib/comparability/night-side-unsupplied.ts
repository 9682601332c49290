import { decimalsFor, formatWithUnit } from '../quantities';
import { estimateOf, type Rule } from './context';

/** A warm night side emits heat that the balance of the method does not supply. */
export const nightSideUnsupplied: Rule = ({ outputs }) => {
	const residual = outputs.energyResidual;
	if (residual === undefined) return [];
	const value = estimateOf(residual);
	const u = residual.standardUncertainty ?? 0;
	if (!(value > u) || value === 0) return [];
	return [
		{
			code: 'night-side-unsupplied',
			level: 'caution',
			text: `The night side sends out ${formatWithUnit(value, decimalsFor(u) ?? 2, 'W/m^2')} of the whole body's surface that nothing in this balance supplies. Stored heat does in truth, and cools the day side by as much.`,
			figures: { energyResidual: value, standardUncertainty: u },
			source: 'Conservation of energy over the whole sphere.',
			inputs: ['nightTemperature'],
			outputs: ['wholeSphereMeanTemperature', 'quarticMeanTemperature']
		}
	];
};
