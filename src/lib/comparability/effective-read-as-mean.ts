import type { Caution } from '../calculation/types';
import { claimOf, type Rule } from './context';

/** An effective or equilibrium temperature beside a number that is taken for the mean surface temperature. */
export const effectiveReadAsMean: Rule = (context) => {
	const cautions: Caution[] = [];
	const compared = claimOf(context);
	if (compared === undefined) return cautions;
	const { claim, output } = compared;
	const evenly = output.temperatureKind === 'effective' || output.temperatureKind === 'equilibrium';
	const claimedMean = claim.temperatureKind === 'skin' || claim.temperatureKind === 'air-2m';
	if (!evenly || !claimedMean || claim.area !== 'whole-sphere') return cautions;
	cautions.push({
		code: 'effective-read-as-mean',
		level: 'caution',
		text: `The ${output.name} is not the mean temperature of a body that is not evenly warm; it is a ceiling for it. The mean surface temperature of the Moon lies some 70 K below.`,
		source: 'Williams, J.-P. et al. (2017), Icarus 283, 300–325.',
		outputs: [output.id]
	});
	return cautions;
};
