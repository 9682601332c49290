import { incompleteBeta } from '../special/beta';
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
		return {
			standardUncertainty: (width * Math.sqrt((a * b) / (a + b + 1))) / (a + b),
			low,
			high: low + width,
			quantile(p) {
				let from = 0;
				let to = 1;
				for (let step = 0; step < 60; step++) {
					const middle = (from + to) / 2;
					if (incompleteBeta(a, b, middle) < p) from = middle;
					else to = middle;
				}
				return low + width * ((from + to) / 2);
			},
			fill(stream, out, n) {
				for (let i = 0; i < n; i++) {
					const first = stream.gamma(a);
					const second = stream.gamma(b);
					const whole = first + second;
					out[i] = low + width * (whole > 0 ? first / whole : 0.5);
				}
			}
		};
	}
};
