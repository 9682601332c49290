import { exp, ln } from '../../exact';
import { incompleteBeta, lnGamma } from '../special/beta';
import { exactly } from './exact';
import { number, rangeFault, type DistributionFamily } from './types';

/** Beta distribution stretched over [low, high]. */
export const beta: DistributionFamily = {
	type: 'beta',
	ways: [['low', 'high', 'alpha', 'beta']],
	fault(parameters, value) {
		for (const parameter of ['alpha', 'beta']) {
			const shape = number(parameters, parameter);
			if (!(shape > 0 && shape <= 1e6)) return { parameter, message: 'must lie above 0 and at most be 1e6' };
		}
		return rangeFault(parameters, value);
	},
	build(parameters, value) {
		const low = number(parameters, 'low');
		const width = number(parameters, 'high') - low;
		const a = number(parameters, 'alpha');
		const b = number(parameters, 'beta');
		if (width === 0) return exactly(value);
		const lnWhole = lnGamma(a) + lnGamma(b) - lnGamma(a + b);
		// Below this shape a gamma number may be too small for a double; its logarithm is not.
		const inLogarithms = Math.min(a, b) < 0.1;
		return {
			standardUncertainty: (width * Math.sqrt((a * b) / (a + b + 1))) / (a + b),
			low,
			high: low + width,
			quantile(p) {
				let from = 0;
				let to = 1;
				let x = a / (a + b);
				// Newton's steps inside a shrinking bracket; halving where the density is of no help.
				for (let step = 0; step < 100; step++) {
					const excess = incompleteBeta(a, b, x) - p;
					if (excess < 0) from = x;
					else to = x;
					const density = exp((a - 1) * ln(x) + (b - 1) * ln(1 - x) - lnWhole);
					let next = x - excess / density;
					if (!(next > from && next < to)) next = (from + to) / 2;
					const moved = Math.abs(next - x);
					x = next;
					if (moved <= 1e-15 * x) break;
				}
				return low + width * x;
			},
			fill(stream, out, n) {
				for (let i = 0; i < n; i++) {
					if (inLogarithms) {
						const first = stream.lnGamma(a);
						out[i] = low + width / (1 + exp(stream.lnGamma(b) - first));
						continue;
					}
					const first = stream.gamma(a);
					const second = stream.gamma(b);
					out[i] = low + width * (first / (first + second));
				}
			}
		};
	}
};
