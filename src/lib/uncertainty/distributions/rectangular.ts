import { exactly } from './exact';
import { below, number, rangeFault, type DistributionFamily } from './types';

/** Equal density between two limits (JCGM 101:2008, 6.4.2). */
export const rectangular: DistributionFamily = {
	type: 'rectangular',
	ways: [['halfWidth'], ['low', 'high']],
	fault: (parameters, value) =>
		'halfWidth' in parameters ? below(parameters, 'halfWidth', 0) : rangeFault(parameters, value),
	build(parameters, value) {
		const half = number(parameters, 'halfWidth');
		const low = 'halfWidth' in parameters ? value - half : number(parameters, 'low');
		const high = 'halfWidth' in parameters ? value + half : number(parameters, 'high');
		const width = 'halfWidth' in parameters ? 2 * half : high - low;
		if (width === 0) return exactly(value);
		return {
			standardUncertainty: width / Math.sqrt(12),
			low,
			high,
			fill: (stream, out, n) => stream.fillUniform(out, n, low, width),
			quantile: (p) => low + width * p
		};
	}
};
