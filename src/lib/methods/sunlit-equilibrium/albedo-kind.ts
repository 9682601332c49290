import type { Caution } from '../../calculation/types';
import { nominalSolarIrradiance } from '../constants';
import type { CautionContext } from '../types';

/** The Earth's albedo, clouds and all, given to a method for a body without an atmosphere. */
export function albedoKind({ setting }: CautionContext): Caution[] {
	const { bondAlbedo, irradiance } = setting.values;
	if (bondAlbedo === undefined || irradiance === undefined) return [];
	const nearEarth = Math.abs(irradiance - nominalSolarIrradiance) <= 15;
	if (!nearEarth || bondAlbedo < 0.28 || bondAlbedo > 0.32) return [];
	return [
		{
			code: 'albedo-kind',
			level: 'caution',
			text: 'An albedo near 0.30 at the Earth’s distance is that of the Earth with its clouds. A body without an atmosphere has none: bare rock and soil reflect about 0.1 to 0.2, and water less.',
			figures: { bondAlbedo, irradiance },
			source: 'Common practice, no source; for bare rock: Moon Bond albedo 0.11, NASA Moon fact sheet.',
			inputs: ['bondAlbedo']
		}
	];
}
