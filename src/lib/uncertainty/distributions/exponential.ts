import { ln } from '../../exact';
import type { DistributionFamily } from './types';

/** Exponential distribution whose mean is the value (JCGM 101:2008, 6.4.10). */
export const exponential: DistributionFamily = {
	type: 'exponential',
	ways: [[]],
	fault: (_parameters, value) =>
		value > 0 ? undefined : { parameter: 'type', message: 'exponential needs a value above zero' },
	build: (_parameters, mean) => ({
		standardUncertainty: mean,
		low: 0,
		high: Infinity,
		quantile: (p) => -mean * ln(1 - p),
		fill(stream, out, n) {
			for (let i = 0; i < n; i++) out[i] = -mean * ln(stream.uniform());
		}
	})
};
