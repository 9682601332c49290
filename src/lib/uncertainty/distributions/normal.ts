import { normalQuantile } from '../special/normal';
import { exactly } from './exact';
import { below, number, type DistributionFamily } from './types';

/** Normal distribution about the value (JCGM 101:2008, 6.4.7). */
export const normal: DistributionFamily = {
	type: 'normal',
	ways: [['standardUncertainty']],
	fault: (parameters) => below(parameters, 'standardUncertainty', 0),
	build(parameters, mean) {
		const deviation = number(parameters, 'standardUncertainty');
		if (deviation === 0) return exactly(mean);
		return {
			standardUncertainty: deviation,
			low: -Infinity,
			high: Infinity,
			normal: { mean, deviation },
			fill: (stream, out, n) => stream.fillNormal(out, n, mean, deviation),
			quantile: (p) => mean + deviation * normalQuantile(p)
		};
	}
};
