import { exp, ln } from '../../exact';
import { incompleteBeta, lnGamma } from './beta';
import { normalQuantile } from './normal';

/** Probability that Student's t with `degrees` degrees of freedom (not only whole ones) exceeds t >= 0. */
export function studentsTUpper(t: number, degrees: number): number {
	const whole = degrees + t * t;
	return incompleteBeta(degrees / 2, 0.5, degrees / whole, (t * t) / whole) / 2;
}

/** Expansion about the normal quantile z (Abramowitz & Stegun 26.7.5): beyond 1e4 degrees of freedom good to 1e-13. */
function expanded(z: number, degrees: number): number {
	const w = z * z;
	const first = (z * (w + 1)) / 4;
	const second = (z * (w * (5 * w + 16) + 3)) / 96;
	const third = (z * (w * (w * (3 * w + 19) + 17) - 15)) / 384;
	return z + (first + (second + third / degrees) / degrees) / degrees;
}

/** Quantile of Student's t distribution; the normal quantile for endless degrees of freedom. */
export function studentsTQuantile(p: number, degrees: number): number {
	if (!(degrees < 1e10)) return normalQuantile(p);
	if (p === 0.5) return 0;
	if (degrees > 1e4) return expanded(normalQuantile(p), degrees);
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
