import { nominalSolarIrradiance } from '../methods/constants';
import type { Rule } from './context';

/** Solar constants of older literature. */
export const irradianceSuperseded: Rule = ({ checked }) => {
	const { setting } = checked.model;
	const irradiance = setting.values.irradiance;
	if (irradiance === undefined || irradiance < 1365 || irradiance > 1372) return [];
	return [
		{
			code: 'irradiance-superseded',
			level: 'note',
			text: 'An irradiance of 1365 to 1372 W m⁻² looks like an older solar constant; the nominal value at 1 au is 1361 W m⁻². Keep it if it stands for another distance.',
			figures: { irradiance, nominal: nominalSolarIrradiance },
			source: 'International Astronomical Union (2015), Resolution B3.',
			inputs: ['irradiance']
		}
	];
};
