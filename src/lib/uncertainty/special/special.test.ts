import { describe, expect, it } from 'vitest';
import { incompleteBeta, lnGamma } from './beta';
import { normalCdf, normalQuantile, normalUpper } from './normal';
import { studentsTQuantile } from './students-t';

const relative = (actual: number, expected: number, tolerance: number): void => {
	expect(Math.abs(actual / expected - 1)).toBeLessThan(tolerance);
};

describe('special functions', () => {
	it('normal distribution: values of Abramowitz & Stegun, table 26.1, and the usual quantiles', () => {
		relative(normalCdf(1), 0.841344746068543, 1e-14);
		relative(normalCdf(2), 0.97724986805182, 1e-14);
		relative(normalUpper(3), 1.349898031630095e-3, 1e-12);
		relative(normalUpper(5), 2.866515718791939e-7, 1e-12);
		relative(normalQuantile(0.975), 1.959963984540054, 1e-14);
		relative(normalQuantile(0.95), 1.6448536269514722, 1e-14);
		relative(normalQuantile(1e-9), -5.997807015007686, 1e-12);
		for (const p of [1e-6, 0.01, 0.2, 0.6, 0.999]) relative(normalCdf(normalQuantile(p)), p, 1e-13);
	});

	it('gamma and incomplete beta functions: identities', () => {
		relative(lnGamma(0.5), Math.log(Math.sqrt(Math.PI)), 1e-14);
		relative(lnGamma(10), Math.log(362880), 1e-14);
		relative(lnGamma(0.1), Math.log(9.513507698668732), 1e-13);
		relative(incompleteBeta(2, 3, 0.4), 0.5248, 1e-14);
		relative(incompleteBeta(3, 2, 0.6), 1 - 0.5248, 1e-14);
	});

	it("Student's t: closed forms for 1, 2 and 4 degrees of freedom", () => {
		relative(studentsTQuantile(0.975, 1), Math.tan(Math.PI * 0.475), 1e-12);
		relative(studentsTQuantile(0.975, 2), 0.95 / Math.sqrt(2 * 0.975 * 0.025), 1e-12);
		const alpha = 4 * 0.975 * 0.025;
		const q = Math.cos(Math.acos(Math.sqrt(alpha)) / 3) / Math.sqrt(alpha);
		relative(studentsTQuantile(0.975, 4), 2 * Math.sqrt(q - 1), 1e-12);
		relative(studentsTQuantile(0.025, 4), -2 * Math.sqrt(q - 1), 1e-12);
	});

	it("Student's t: keeps its digits for very many degrees of freedom", () => {
		const z = normalQuantile(0.975);
		// First term of the expansion about the normal quantile (Abramowitz & Stegun 26.7.5); the next is below 1e-11.
		for (const degrees of [1e6, 1e8, 9e9]) {
			relative(studentsTQuantile(0.975, degrees), z + (z * z * z + z) / (4 * degrees), 1e-11);
		}
		// Both forms meet where one takes over from the other.
		relative(studentsTQuantile(0.995, 10_001), studentsTQuantile(0.995, 9_999), 1e-7);
		relative(studentsTQuantile(0.995, 10_000.000001), studentsTQuantile(0.995, 10_000), 1e-10);
	});

	it("Student's t: JCGM 100:2008, table G.2 (two decimals)", () => {
		expect(studentsTQuantile(0.975, 8)).toBeCloseTo(2.31, 2);
		expect(studentsTQuantile(0.995, 16)).toBeCloseTo(2.92, 2);
		expect(studentsTQuantile(0.975, 50)).toBeCloseTo(2.01, 2);
		expect(studentsTQuantile(0.975, Infinity)).toBeCloseTo(1.96, 2);
	});
});
