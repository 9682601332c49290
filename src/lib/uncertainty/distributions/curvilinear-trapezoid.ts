import { ln } from '../../exact';
import { exactly } from './exact';
import { below, number, type DistributionFamily } from './types';

/** Rectangle whose limits are themselves known only to within the inexactness (JCGM 101:2008, 6.4.3). */
export const curvilinearTrapezoid: DistributionFamily = {
	type: 'curvilinear-trapezoid',
	ways: [['halfWidth', 'inexactness']],
	fault(parameters) {
		const half = number(parameters, 'halfWidth');
		const inexactness = number(parameters, 'inexactness');
		if (half > 0 && inexactness >= half) {
			return { parameter: 'inexactness', message: 'must be smaller than the half-width' };
		}
		return below(parameters, 'halfWidth', 0) ?? below(parameters, 'inexactness', 0);
	},
	build(parameters, value) {
		const half = number(parameters, 'halfWidth');
		const d = number(parameters, 'inexactness');
		if (half === 0) return exactly(value);
		const upper = (x: number): number => {
			if (d === 0) return (half - x) / (2 * half);
			if (x <= half - d) return 0.5 - (x * ln((half + d) / (half - d))) / (4 * d);
			return (half + d - x - x * ln((half + d) / x)) / (4 * d);
		};
		const quantileAbove = (tail: number): number => {
			let low = 0;
			let high = half + d;
			for (let step = 0; step < 60; step++) {
				const middle = (low + high) / 2;
				if (upper(middle) > tail) low = middle;
				else high = middle;
			}
			return (low + high) / 2;
		};
		return {
			standardUncertainty: Math.sqrt((half * half) / 3 + (d * d) / 9),
			low: value - half - d,
			high: value + half + d,
			quantile: (p) => (p <= 0.5 ? value - quantileAbove(p) : value + quantileAbove(1 - p)),
			fill(stream, out, n) {
				for (let i = 0; i < n; i++) {
					const reach = half + d * (1 - 2 * stream.uniform());
					out[i] = value + reach * (2 * stream.uniform() - 1);
				}
			}
		};
	}
};
