import type { Rule } from './context';

/** An emissivity of exactly one, where it bears on a result. */
export const emissivityAssumedOne: Rule = ({ checked }) => {
	const { setting, outputs } = checked.model;
	if (setting.values.emissivity !== 1) return [];
	const affected = outputs.filter(
		({ temperatureKind }) => temperatureKind !== undefined && temperatureKind !== 'effective'
	);
	if (affected.length === 0) return [];
	return [
		{
			code: 'emissivity-assumed-one',
			level: 'note',
			text: 'The surface is taken as a black body. Rock and soil radiate some 5 % less, which makes them about 1 % warmer on the absolute scale.',
			figures: { emissivity: 1 },
			source:
				'Stefan-Boltzmann law: the temperature goes with the inverse fourth root of the emissivity. 0.95 for lunar soil: Hayne, P. O. et al. (2017), Journal of Geophysical Research: Planets 122, 2371.',
			inputs: ['emissivity'],
			outputs: affected.map(({ id }) => id)
		}
	];
};
