import { exactly } from './exact';
import { below, number, type DistributionFamily } from './types';

/** Symmetric trapezoid whose top is `beta` times as long as its base (JCGM 101:2008, 6.4.4). */
export const trapezoidal: DistributionFamily = {
	type: 'trapezoidal',
	ways: [['halfWidth', 'beta']],
	fault(parameters) {
		const beta = number(parameters, 'beta');
		if (!(beta >= 0 && beta <= 1)) return { parameter: 'beta', message: 'must lie between 0 and 1' };
		return below(parameters, 'halfWidth', 0);
	},
	build(parameters, value) {
		const half = number(parameters, 'halfWidth');
		const beta = number(parameters, 'beta');
		if (half === 0) return exactly(value);
		const ramp = half * (1 - beta);
		const height = 1 / (half * (1 + beta));
		const inRamp = (ramp * height) / 2;
		const lower = (p: number) =>
			p < inRamp ? -half + Math.sqrt((2 * p * ramp) / height) : -half + ramp + (p - inRamp) / height;
		return {
			standardUncertainty: half * Math.sqrt((1 + beta * beta) / 6),
			low: value - half,
			high: value + half,
			quantile: (p) => value + (p <= 0.5 ? lower(p) : -lower(1 - p)),
			fill(stream, out, n) {
				for (let i = 0; i < n; i++) {
					const first = stream.uniform();
					const second = stream.uniform();
					out[i] = value - half + half * ((1 + beta) * first + (1 - beta) * second);
				}
			}
		};
	}
};
