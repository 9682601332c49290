import { quarterRoot } from '../exact';
import { stefanBoltzmann } from '../methods/constants';
import { formatWithUnit } from '../quantities';
import type { Rule } from './context';
import { wholeSphereFlux, wholeSphereMeans } from './whole-sphere-candidates';

/** A whole-sphere mean that no airless body with this sunlight and emissivity can have. */
export const aboveAirlessBound: Rule = (context) => {
	const heat = wholeSphereFlux(context);
	if (heat === undefined) return [];
	const bound = quarterRoot(heat.flux / (heat.emissivity * stefanBoltzmann));
	return wholeSphereMeans(context)
		.filter(({ temperature }) => temperature > bound * (1 + 1e-12))
		.map(({ name, temperature, input, output }) => ({
			code: 'above-airless-bound',
			level: 'caution',
			text: `${name}, ${formatWithUnit(temperature, 1, 'K')}, lies above ${formatWithUnit(bound, 1, 'K')}, the highest mean that a body without an atmosphere can have with this sunlight. No storage, rotation or transport gives more.`,
			figures: { mean: temperature, bound },
			source:
				'The mean of T cannot exceed the fourth root of the mean of T⁴ (Hölder’s inequality) with the Stefan-Boltzmann law.',
			...(input === undefined ? {} : { inputs: [input] }),
			...(output === undefined ? {} : { outputs: [output] })
		}));
};
