import { exp, ln } from '../../exact';
import { incompleteBeta, lnGamma } from './beta';
import { normalQuantile } from './normal';

/** Probability that Student's t with `degrees` degrees of freedom (not only whole ones) exceeds t >= 0. */
export function studentsTUpper(t: number, degrees: number): number {
	const whole = degrees + t * t;
	return incompleteBeta(degrees / 2, 0.5, degrees / whole, (t * t) / whole) / 2;
}

/** Quantile of Student's t distribution; the normal quantile for endless degrees of freedom. */
export function studentsTQuantile(p: number, degrees: number): number {
	if (!(degrees < 1e10)) return normalQuantile(p);
	if (p === 0.5) return 0;
	const upper = Math.min(p, 1 - p);
	let low = 0;
	let high = 1;
	while (studentsTUpper(high, degrees) > upper) {
		low = high;
		high *= 2;
	}
	const lnFront = lnGamma((degrees + 1) / 2) - lnGamma(degrees / 2) - 0.5 * ln(degrees * 3.141592653589793);
	let t = (low + high) / 2;
	for (let step = 0; step < 200; step++) {
		const excess = studentsTUpper(t, degrees) - upper;
		if (excess > 0) low = t;
		else high = t;
		const density = exp(lnFront - ((degrees + 1) / 2) * ln(1 + (t * t) / degrees));
		let next = t + excess / density;
		if (!(next > low && next < high)) next = (low + high) / 2;
		const moved = Math.abs(next - t);
		t = next;
		if (moved <= 1e-15 * t) break;
	}
	return p < 0.5 ? -t : t;
}
