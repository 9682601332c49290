import { studentsTQuantile } from '../special/students-t';
import { exactly } from './exact';
import { below, number, type DistributionFamily } from './types';

/**
 * Scaled and shifted t distribution (JCGM 101:2008, 6.4.9). `standardUncertainty` is its scale, s/sqrt(n): the
 * standard uncertainty of JCGM 100, which the degrees of freedom then qualify.
 */
export const studentsT: DistributionFamily = {
	type: 'students-t',
	ways: [['standardUncertainty', 'degreesOfFreedom']],
	fault: (parameters) => below(parameters, 'standardUncertainty', 0),
	build(parameters, centre) {
		const scale = number(parameters, 'standardUncertainty');
		const degrees = number(parameters, 'degreesOfFreedom');
		if (scale === 0) return exactly(centre);
		return {
			standardUncertainty: scale,
			low: -Infinity,
			high: Infinity,
			quantile: (p) => centre + scale * studentsTQuantile(p, degrees),
			fill(stream, out, n) {
				for (let i = 0; i < n; i++) {
					const z = stream.normal();
					out[i] = centre + scale * z * Math.sqrt(degrees / (2 * stream.gamma(degrees / 2)));
				}
			}
		};
	}
};
