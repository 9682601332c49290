import { cos, pi, sin } from '../../exact';
import { exactly } from './exact';
import { below, number, type DistributionFamily } from './types';

/** U-shaped distribution of a quantity that swings as a sine (JCGM 101:2008, 6.4.6). */
export const arcsine: DistributionFamily = {
	type: 'arcsine',
	ways: [['halfWidth']],
	fault: (parameters) => below(parameters, 'halfWidth', 0),
	build(parameters, value) {
		const half = number(parameters, 'halfWidth');
		if (half === 0) return exactly(value);
		return {
			standardUncertainty: half / Math.sqrt(2),
			low: value - half,
			high: value + half,
			quantile: (p) => value - half * cos(pi * p),
			fill(stream, out, n) {
				stream.fillUniform(out, n, 0, 2 * pi);
				for (let i = 0; i < n; i++) out[i] = value + half * sin(out[i] as number);
			}
		};
	}
};
