import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { cos, exp, fourthPower, integerPower, ln, quarterRoot, sin } from './index';

const close = (a: number, b: number, relative: number): void => {
	expect(Math.abs(a - b)).toBeLessThanOrEqual(relative * Math.abs(b));
};

describe('functions built of exact operations', () => {
	it('exp is within an ulp or so of the engine', () => {
		fc.assert(
			fc.property(fc.double({ min: -700, max: 700, noNaN: true }), (x) => close(exp(x), Math.exp(x), 3e-16)),
			{ numRuns: 5000 }
		);
		expect(exp(0)).toBe(1);
		expect(exp(1)).toBeCloseTo(Math.E, 14);
		expect(exp(-1000)).toBe(0);
		expect(exp(1000)).toBe(Infinity);
		expect(exp(-740)).toBe(Math.exp(-740));
		expect(exp(709.7)).toBeCloseTo(Math.exp(709.7), -300);
	});

	it('ln likewise', () => {
		fc.assert(
			fc.property(fc.double({ min: 1e-320, max: 1e300, noNaN: true }), (x) => {
				expect(Math.abs(ln(x) - Math.log(x))).toBeLessThanOrEqual(
					3e-16 * Math.max(Math.abs(Math.log(x)), 1e-3)
				);
			}),
			{ numRuns: 5000 }
		);
		fc.assert(
			fc.property(fc.double({ min: 0.5, max: 2, noNaN: true }), (x) => close(ln(x), Math.log(x), 3e-16)),
			{ numRuns: 5000 }
		);
		expect(ln(1)).toBe(0);
		expect(ln(0)).toBe(-Infinity);
		expect(ln(-1)).toBeNaN();
	});

	it('sine and cosine likewise, up to many turns', () => {
		fc.assert(
			fc.property(fc.double({ min: -1e5, max: 1e5, noNaN: true }), (x) => {
				expect(Math.abs(sin(x) - Math.sin(x))).toBeLessThanOrEqual(2.3e-16);
				expect(Math.abs(cos(x) - Math.cos(x))).toBeLessThanOrEqual(2.3e-16);
			}),
			{ numRuns: 5000 }
		);
		expect(sin(Math.PI)).toBeCloseTo(Math.sin(Math.PI), 30);
		expect(sin(1e6)).toBeNaN();
	});

	it('powers', () => {
		expect(quarterRoot(625)).toBe(5);
		expect(fourthPower(5)).toBe(625);
		expect(integerPower(2, -3)).toBe(0.125);
	});
});
