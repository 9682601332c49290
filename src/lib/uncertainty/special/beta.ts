import { exp, ln } from '../../exact';

const halfLnTwoPi = 0.9189385332046728;

/** Logarithm of the gamma function for x > 0: Stirling's series above 12, the recurrence below. */
export function lnGamma(x: number): number {
	let shift = 1;
	let y = x;
	while (y < 12) shift *= y++;
	const z = 1 / (y * y);
	const series =
		(1 / 12 -
			z * (1 / 360 - z * (1 / 1260 - z * (1 / 1680 - z * (1 / 1188 - z * (691 / 360360 - z / 156)))))) /
		y;
	return (y - 0.5) * ln(y) - y + halfLnTwoPi + series - ln(shift);
}

/** Continued fraction of the incomplete beta function by Lentz's method (DLMF 8.17.22). */
function fraction(a: number, b: number, x: number): number {
	const tiny = 1e-300;
	const guard = (value: number) => (Math.abs(value) < tiny ? tiny : value);
	let c = 1;
	let d = 1 / guard(1 - ((a + b) * x) / (a + 1));
	let result = d;
	for (let m = 1; m < 5000; m++) {
		const even = (m * (b - m) * x) / ((a + 2 * m - 1) * (a + 2 * m));
		d = 1 / guard(1 + even * d);
		c = guard(1 + even / c);
		result *= d * c;
		const odd = (-(a + m) * (a + b + m) * x) / ((a + 2 * m) * (a + 2 * m + 1));
		d = 1 / guard(1 + odd * d);
		c = guard(1 + odd / c);
		const factor = d * c;
		result *= factor;
		if (Math.abs(factor - 1) < 1e-16) break;
	}
	return result;
}

/** Regularised incomplete beta function I_x(a, b); `y` is 1 - x, given apart so that small values keep digits. */
export function incompleteBeta(a: number, b: number, x: number, y = 1 - x): number {
	if (x <= 0) return 0;
	if (y <= 0) return 1;
	const front = exp(a * ln(x) + b * ln(y) + lnGamma(a + b) - lnGamma(a) - lnGamma(b));
	if (x < (a + 1) / (a + b + 2)) return (front * fraction(a, b, x)) / a;
	return 1 - (front * fraction(b, a, y)) / b;
}
