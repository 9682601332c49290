import { describe, expect, it } from 'vitest';
import { Stream } from '../random/stream';
import { distributionFamily, distributionFamilies } from './index';
import type { Distribution, Parameters } from './types';

const cases: [string, Parameters, number][] = [
	['normal', { standardUncertainty: 2 }, 10],
	['rectangular', { halfWidth: 3 }, 10],
	['rectangular', { low: 1, high: 5 }, 2],
	['triangular', { halfWidth: 3 }, 10],
	['triangular', { low: 0, mode: 1, high: 5 }, 1],
	['triangular', { low: 0, mode: 0, high: 5 }, 1],
	['trapezoidal', { halfWidth: 2, beta: 0.4 }, -3],
	['trapezoidal', { halfWidth: 2, beta: 1 }, -3],
	['arcsine', { halfWidth: 0.5 }, 1],
	['curvilinear-trapezoid', { halfWidth: 2, inexactness: 0.7 }, 5],
	['lognormal', { geometricStandardDeviation: 1.3 }, 4],
	['beta', { low: 0, high: 10, alpha: 2, beta: 5 }, 3],
	['beta', { low: 0, high: 1, alpha: 0.5, beta: 0.8 }, 0.4],
	['exponential', {}, 3],
	['discrete', { values: [3, 1, 2], weights: [1, 1, 2] }, 2]
];

function build(type: string, parameters: Parameters, value: number): Distribution {
	const family = distributionFamily(type);
	if (family === undefined) throw new Error(type);
	expect(family.fault(parameters, value)).toBeUndefined();
	return family.build(parameters, value);
}

function deviation(values: Float64Array): number {
	const mean = values.reduce((sum, x) => sum + x, 0) / values.length;
	return Math.sqrt(values.reduce((sum, x) => sum + (x - mean) * (x - mean), 0) / values.length);
}

describe('distributions', () => {
	it.each(cases)(
		'%s %j about %s: draws and quantiles agree with each other and with its uncertainty',
		(type, parameters, value) => {
			const n = 200_000;
			const distribution = build(type, parameters, value);
			const drawn = new Float64Array(n);
			distribution.fill(new Stream(`${type} ${JSON.stringify(parameters)}`), drawn, n);
			expect(Math.abs(deviation(drawn) / distribution.standardUncertainty - 1)).toBeLessThan(0.01);
			const sorted = Float64Array.from(drawn).sort();
			expect(sorted[0]).toBeGreaterThanOrEqual(distribution.low);
			expect(sorted[n - 1]).toBeLessThanOrEqual(distribution.high);
			const inverted = Float64Array.from({ length: 2_000 }, (_, i) =>
				distribution.quantile((i + 0.5) / 2_000)
			);
			expect(Math.abs(deviation(inverted) / distribution.standardUncertainty - 1)).toBeLessThan(0.01);
			for (const p of [0.05, 0.3, 0.62, 0.95]) {
				const end = distribution.quantile(p);
				const share = drawn.filter((x) => x <= end).length / n;
				if (type === 'discrete') expect(share).toBeGreaterThan(p - 0.006);
				else expect(Math.abs(share - p)).toBeLessThan(0.006);
			}
		}
	);

	it("Student's t is wider than its scale by the root of nu / (nu - 2)", () => {
		const distribution = build('students-t', { standardUncertainty: 2, degreesOfFreedom: 12 }, 1);
		const drawn = new Float64Array(400_000);
		distribution.fill(new Stream('t'), drawn, drawn.length);
		expect(distribution.standardUncertainty).toBe(2);
		expect(Math.abs(deviation(drawn) / (2 * Math.sqrt(12 / 10)) - 1)).toBeLessThan(0.01);
		const end = distribution.quantile(0.95);
		const share = drawn.filter((x) => x <= end).length / drawn.length;
		expect(Math.abs(share - 0.95)).toBeLessThan(0.003);
	});

	it('a beta distribution with next to no middle draws its ends', () => {
		const distribution = build('beta', { low: 0, high: 1, alpha: 1e-3, beta: 2e-3 }, 0.5);
		const drawn = new Float64Array(20_000);
		distribution.fill(new Stream('b'), drawn, drawn.length);
		const ends = drawn.filter((x) => x < 0.01 || x > 0.99).length / drawn.length;
		expect(ends).toBeGreaterThan(0.98);
		// Mean alpha / (alpha + beta).
		const mean = drawn.reduce((sum, x) => sum + x, 0) / drawn.length;
		expect(Math.abs(mean - 1 / 3)).toBeLessThan(0.015);
	});

	it('gives the standard uncertainties of JCGM 101:2008, 6.4', () => {
		expect(build('rectangular', { halfWidth: 3 }, 0).standardUncertainty).toBeCloseTo(3 / Math.sqrt(3), 14);
		expect(build('triangular', { halfWidth: 3 }, 0).standardUncertainty).toBeCloseTo(3 / Math.sqrt(6), 14);
		expect(build('arcsine', { halfWidth: 3 }, 0).standardUncertainty).toBeCloseTo(3 / Math.sqrt(2), 14);
		expect(build('trapezoidal', { halfWidth: 3, beta: 0 }, 0).standardUncertainty).toBeCloseTo(
			3 / Math.sqrt(6),
			14
		);
	});

	it('no width means exact', () => {
		expect(build('normal', { standardUncertainty: 0 }, 5).standardUncertainty).toBe(0);
		expect(build('rectangular', { low: 5, high: 5 }, 5).quantile(0.2)).toBe(5);
	});

	it.each([
		['normal', { standardUncertainty: -1 }, 0, 'standardUncertainty'],
		['rectangular', { low: 2, high: 1 }, 1.5, 'low'],
		['rectangular', { low: 2, high: 3 }, 4, 'high'],
		['triangular', { low: 0, mode: 9, high: 3 }, 1, 'mode'],
		['trapezoidal', { halfWidth: 1, beta: 2 }, 1, 'beta'],
		['curvilinear-trapezoid', { halfWidth: 1, inexactness: 1 }, 1, 'inexactness'],
		['lognormal', { geometricStandardDeviation: 2 }, -1, 'type'],
		['lognormal', { geometricStandardDeviation: 0.5 }, 1, 'geometricStandardDeviation'],
		['beta', { low: 0, high: 1, alpha: 0, beta: 1 }, 0.5, 'alpha'],
		['exponential', {}, 0, 'type'],
		['discrete', { values: [1, 2], weights: [1] }, 1, 'weights'],
		['discrete', { values: [1, 2], weights: [0, 0] }, 1, 'weights']
	] as [string, Parameters, number, string][])(
		'%s %j about %s: the fault is %s',
		(type, parameters, value, name) => {
			expect(distributionFamily(type)?.fault(parameters, value)?.parameter).toBe(name);
		}
	);

	it('knows each type once', () => {
		expect(new Set(distributionFamilies.map(({ type }) => type)).size).toBe(12);
	});
});
