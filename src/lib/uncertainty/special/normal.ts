import { exp, ln } from '../../exact';

const rootTwoPi = 2.5066282746310002;

/** Probability that a standard normal number exceeds z, to about 1e-15 of itself. */
export function normalUpper(z: number): number {
	if (z < 0) return 1 - normalUpper(-z);
	if (z > 38) return 0;
	const density = exp((-z * z) / 2) / rootTwoPi;
	if (z < 3) {
		// Series of positive terms: z + z^3/3 + z^5/15 + ... times the density is the part between 0 and z.
		let term = z;
		let sum = z;
		for (let k = 3; term > 1e-17 * sum; k += 2) {
			term *= (z * z) / k;
			sum += term;
		}
		return 0.5 - density * sum;
	}
	// Continued fraction of the tail (Laplace), from the inside out.
	let fraction = z;
	for (let k = 200; k > 0; k--) fraction = z + k / fraction;
	return density / fraction;
}

/** Distribution function of the standard normal distribution. */
export function normalCdf(z: number): number {
	return z > 0 ? 1 - normalUpper(z) : normalUpper(-z);
}

/**
 * Quantile of the standard normal distribution: a start good to 5e-4 (Abramowitz & Stegun 26.2.23) and Halley's steps on the
 * upper tail, relative to its size.
 */
export function normalQuantile(p: number): number {
	if (!(p > 0 && p < 1)) return p === 0 ? -Infinity : p === 1 ? Infinity : NaN;
	if (p === 0.5) return 0;
	const upper = Math.min(p, 1 - p);
	const t = Math.sqrt(-2 * ln(upper));
	let z =
		t - (2.515517 + t * (0.802853 + t * 0.010328)) / (1 + t * (1.432788 + t * (0.189269 + t * 0.001308)));
	for (let step = 0; step < 3; step++) {
		const density = exp((-z * z) / 2) / rootTwoPi;
		const e = (normalUpper(z) - upper) / density;
		z += e / (1 - (z * e) / 2);
	}
	return p < 0.5 ? -z : z;
}
