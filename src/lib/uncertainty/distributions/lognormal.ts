import { exp, ln } from '../../exact';
import { normalQuantile } from '../special/normal';
import { exactly } from './exact';
import { below, number, type DistributionFamily } from './types';

/** Distribution whose logarithm is normal; the value is its median (geometric mean). */
export const lognormal: DistributionFamily = {
	type: 'lognormal',
	ways: [['geometricStandardDeviation']],
	fault(parameters, value) {
		if (value <= 0) {
			return {
				parameter: 'type',
				message: 'lognormal needs a value above zero (a temperature counts from absolute zero)'
			};
		}
		return below(parameters, 'geometricStandardDeviation', 1);
	},
	build(parameters, median) {
		const s = ln(number(parameters, 'geometricStandardDeviation'));
		if (s === 0) return exactly(median);
		const spread = exp(s * s);
		return {
			standardUncertainty: median * Math.sqrt(spread * (spread - 1)),
			low: 0,
			high: Infinity,
			quantile: (p) => median * exp(s * normalQuantile(p)),
			fill(stream, out, n) {
				stream.fillNormal(out, n, 0, s);
				for (let i = 0; i < n; i++) out[i] = median * exp(out[i] as number);
			}
		};
	}
};
