import { arcsine } from './arcsine';
import { beta } from './beta';
import { curvilinearTrapezoid } from './curvilinear-trapezoid';
import { discrete } from './discrete';
import { exact } from './exact';
import { exponential } from './exponential';
import { lognormal } from './lognormal';
import { normal } from './normal';
import { rectangular } from './rectangular';
import { studentsT } from './students-t';
import { trapezoidal } from './trapezoidal';
import { triangular } from './triangular';
import type { DistributionFamily } from './types';

/** Every type of distribution. A new one is a file and a line here. */
export const distributionFamilies: readonly DistributionFamily[] = [
	exact,
	normal,
	rectangular,
	triangular,
	trapezoidal,
	arcsine,
	curvilinearTrapezoid,
	lognormal,
	studentsT,
	beta,
	exponential,
	discrete
];

const byType = new Map<string, DistributionFamily>(
	distributionFamilies.map((family) => [family.type, family])
);

export function distributionFamily(type: string): DistributionFamily | undefined {
	return byType.get(type);
}
