import { describe, expect, it } from 'vitest';
import type { Correlation } from '../calculation/types';
import type { Columns } from '../methods/types';
import { distributionFamily } from './distributions';
import { firstOrder } from './first-order';
import type { InputColumn, TrialModel } from './trial-model';

function normal(
	id: string,
	value: number,
	standardUncertainty: number,
	degreesOfFreedom = Infinity
): InputColumn {
	const family = distributionFamily('normal');
	if (family === undefined) throw new Error('normal');
	return {
		id,
		path: `/inputs/${id}`,
		value,
		distribution: family.build({ standardUncertainty }, value),
		degreesOfFreedom,
		domain: { low: null, high: null }
	};
}

function propagate(
	columns: InputColumn[],
	f: (inputs: Columns, i: number) => number,
	correlations: Correlation[] = []
) {
	const model: TrialModel = {
		columns,
		correlations,
		outputs: ['y'],
		evaluate(inputs, n, out) {
			for (let i = 0; i < n; i++) (out.y as Float64Array)[i] = f(inputs, i);
		}
	};
	const { y } = firstOrder(model, 0.95);
	if (y === undefined) throw new Error('no output');
	return y;
}

const at = (inputs: Columns, id: string, i: number) => inputs[id]?.[i] as number;
/** Slope in x of the fourth root of 1 - x. */
const slope = (x: number) => -0.25 / Math.pow(1 - x, 0.75);
const root = (inputs: Columns, i: number) => Math.sqrt(Math.sqrt(1 - at(inputs, 'x', i)));

describe('first order', () => {
	it.each([0, 1e-9, 0.3, 0.99, 0.999, 0.99999])('keeps its digits near the edge of a root, at %d', (x) => {
		const { coefficients } = propagate([normal('x', x, 1e-6)], root);
		expect(Math.abs((coefficients.x ?? NaN) / slope(x) - 1)).toBeLessThan(2e-8);
	});

	it('keeps its digits for a tiny input beside a large one', () => {
		const { coefficients } = propagate([normal('x', 0, 1e-9)], (inputs, i) => 240 + at(inputs, 'x', i));
		expect(coefficients.x).toBeCloseTo(1, 4);
	});

	it('finds no slope where it is endless', () => {
		expect(() => propagate([normal('x', 1, 0.01)], root)).toThrow(/no finite slope/);
		expect(() => propagate([normal('x', 5e-324, 5e-324)], root)).toThrow(/no finite slope/);
	});

	it('takes the one-sided slope of what ends there', () => {
		const { coefficients } = propagate([normal('x', 1, 0.01)], (inputs, i) => {
			const x = at(inputs, 'x', i);
			return x > 1 ? NaN : 3 * x * x;
		});
		expect(coefficients.x).toBeCloseTo(6, 8);
	});

	it('gives an input that does not matter the slope zero, to the last bit', () => {
		const { coefficients, standardUncertainty } = propagate([normal('x', 300, 1)], () => 254.5781401165717);
		expect(coefficients.x).toBe(0);
		expect(standardUncertainty).toBe(0);
	});

	it('does not take correlated inputs for independent sources of freedom', () => {
		const sum = (inputs: Columns, i: number) => at(inputs, 'a', i) + at(inputs, 'b', i);
		const columns = [normal('a', 1, 1, 9), normal('b', 1, 1, 9)];
		const free = (coefficient: number) =>
			propagate(columns, sum, [{ a: 'a', b: 'b', coefficient }]).effectiveDegreesOfFreedom;
		expect(free(0)).toBeCloseTo(18, 8);
		// One quantity counted twice knows no more than once; nor does a difference that nearly cancels know nothing.
		expect(free(1)).toBeCloseTo(9, 8);
		expect(free(-0.99)).toBeCloseTo(9, 8);
	});
});
