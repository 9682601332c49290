import { formatWithUnit } from '../quantities';
import type { Rule } from './context';

/*
 * Lowest burn thresholds by contact time, from memory of ISO 13732-1:2006, where they depend on the material: 43 degC
 * for 8 h and longer and 48 degC for 10 min hold for every material, some 51 degC for 1 min and 65 degC for 1 s for
 * bare metal. The text names the standard and leaves the decision to it.
 */
const thresholds = [
	{ celsius: 65, contact: 'of a second, on bare metal' },
	{ celsius: 51, contact: 'of a minute, on bare metal' },
	{ celsius: 48, contact: 'of ten minutes, on any material' },
	{ celsius: 43, contact: 'of hours, on any material' }
] as const;

/** A computed surface temperature at which skin that touches it may burn. */
export const hotSurface: Rule = ({ checked, outputs }) => {
	const surface = outputs.surfaceTemperature;
	const spec = checked.model.outputs.find(({ id }) => id === 'surfaceTemperature');
	if (surface === undefined || spec?.area !== 'site') return [];
	const highest = (surface.interval?.high ?? surface.value) - 273.15;
	const reached = thresholds.find(({ celsius }) => highest >= celsius);
	if (reached === undefined) return [];
	return [
		{
			code: 'hot-surface',
			level: 'caution',
			text: `The surface may reach ${formatWithUnit(highest, 0, 'degC')}. From about ${formatWithUnit(reached.celsius, 0, 'degC')} skin can burn after a contact ${reached.contact}. The thresholds by contact time and material are those of ISO 13732-1; where people can touch the surface, it and local codes come first, and the decision is for a licensed professional.`,
			figures: { surfaceCelsius: highest, thresholdCelsius: reached.celsius },
			source: 'ISO 13732-1:2006.',
			outputs: ['surfaceTemperature']
		}
	];
};
