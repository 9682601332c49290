import { ProblemError } from '../calculation/problem';
import { studentsTQuantile } from './special/students-t';
import { emptyColumns, type InputColumn, type TrialModel } from './trial-model';

export interface FirstOrderOutput {
	value: number;
	standardUncertainty: number;
	effectiveDegreesOfFreedom: number;
	interval: { low: number; high: number };
	/** Partial derivatives in SI by column id, for every uncertain input. */
	coefficients: Record<string, number>;
}

const offsets = [-2, -1, 1, 2] as const;

/** Step of the difference quotient: small against the value, and never against the uncertainty alone. */
function stepOf({ value, distribution }: InputColumn): number {
	return 1e-3 * Math.max(Math.abs(value), Math.min(distribution.standardUncertainty, 1e300));
}

/** Derivative from values at -2, -1, 0, 1, 2 steps: five points where finite, else from the finite side. */
function derivative(
	minus2: number,
	minus1: number,
	at: number,
	plus1: number,
	plus2: number,
	h: number
): number {
	const central = (minus2 - 8 * minus1 + 8 * plus1 - plus2) / (12 * h);
	if (Number.isFinite(central)) return central;
	const forward = (-3 * at + 4 * plus1 - plus2) / (2 * h);
	if (Number.isFinite(forward)) return forward;
	return (3 * at - 4 * minus1 + minus2) / (2 * h);
}

/**
 * Law of propagation of uncertainty with correlations (JCGM 100:2008, 5.1 and 5.2), partial derivatives by five-point
 * differences (relative error about 1e-12); effective degrees of freedom by Welch-Satterthwaite (G.4.1), kept
 * fractional; the interval from the t or normal quantile.
 */
export function firstOrder(model: TrialModel, coverage: number): Record<string, FirstOrderOutput> {
	const uncertain = model.columns.filter(({ distribution }) => distribution.standardUncertainty > 0);
	const n = 1 + 4 * uncertain.length;
	const columns = emptyColumns(
		model.columns.map(({ id }) => id),
		n
	);
	for (const { id, value } of model.columns) (columns[id] as Float64Array).fill(value);
	uncertain.forEach((column, k) => {
		const h = stepOf(column);
		const values = columns[column.id] as Float64Array;
		offsets.forEach((offset, j) => (values[1 + 4 * k + j] = column.value + offset * h));
	});
	const out = emptyColumns(model.outputs, n);
	model.evaluate(columns, n, out);
	const results: Record<string, FirstOrderOutput> = {};
	for (const id of model.outputs) {
		const y = out[id] as Float64Array;
		const value = y[0] as number;
		const coefficients: Record<string, number> = {};
		uncertain.forEach((column, k) => {
			const [a, b, c, d] = y.subarray(1 + 4 * k, 5 + 4 * k) as unknown as [number, number, number, number];
			const slope = derivative(a, b, value, c, d, stepOf(column));
			if (!Number.isFinite(slope)) {
				throw new ProblemError(
					'no-derivative',
					`${id} has no finite slope in ${column.id} at this value, so its uncertainty cannot be propagated linearly. Move the value off the limit or leave its uncertainty out.`,
					`${column.path}/value`
				);
			}
			coefficients[column.id] = slope;
		});
		results[id] = { value, coefficients, ...combine(model, uncertain, coefficients, value, coverage) };
	}
	return results;
}

function combine(
	model: TrialModel,
	uncertain: readonly InputColumn[],
	coefficients: Record<string, number>,
	value: number,
	coverage: number
): Omit<FirstOrderOutput, 'value' | 'coefficients'> {
	const contribution = new Map(
		uncertain.map(({ id, distribution }) => [
			id,
			(coefficients[id] as number) * distribution.standardUncertainty
		])
	);
	let variance = 0;
	let weighted = 0;
	for (const { id, degreesOfFreedom } of uncertain) {
		const square = (contribution.get(id) as number) * (contribution.get(id) as number);
		variance += square;
		weighted += (square * square) / degreesOfFreedom;
	}
	for (const { a, b, coefficient } of model.correlations) {
		variance += 2 * coefficient * (contribution.get(a) ?? 0) * (contribution.get(b) ?? 0);
	}
	variance = Math.max(variance, 0);
	const standardUncertainty = Math.sqrt(variance);
	const effectiveDegreesOfFreedom = weighted > 0 ? (variance * variance) / weighted : Infinity;
	const reach =
		standardUncertainty === 0
			? 0
			: standardUncertainty * studentsTQuantile((1 + coverage) / 2, effectiveDegreesOfFreedom);
	return {
		standardUncertainty,
		effectiveDegreesOfFreedom,
		interval: { low: value - reach, high: value + reach }
	};
}
