import { quarterRoot } from '../exact';
import { stefanBoltzmann } from '../methods/constants';
import { formatWithUnit } from '../quantities';
import type { Rule } from './context';
import { wholeSphereFlux, wholeSphereMeans } from './whole-sphere-candidates';

/** A whole-sphere mean below that of a body without any storage of heat. */
export const belowNoStorageBound: Rule = (context) => {
	const heat = wholeSphereFlux(context);
	if (heat === undefined) return [];
	const subsolar = quarterRoot((4 * heat.flux) / (heat.emissivity * stefanBoltzmann));
	const bound = 0.4 * subsolar;
	return wholeSphereMeans(context)
		.filter(({ temperature }) => temperature < bound * (1 - 1e-12))
		.map(({ name, temperature, input, output }) => ({
			code: 'below-no-storage-bound',
			level: 'caution',
			text: `${name}, ${formatWithUnit(temperature, 1, 'K')}, lies below ${formatWithUnit(bound, 1, 'K')}, the mean of a body whose night side falls to absolute zero. Storage of heat only raises it.`,
			figures: { mean: temperature, bound },
			source: 'Own derivation for constant albedo and emissivity: 2/5 of the subsolar temperature.',
			...(input === undefined ? {} : { inputs: [input] }),
			...(output === undefined ? {} : { outputs: [output] })
		}));
};
