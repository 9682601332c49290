import { ProblemError } from '../calculation/problem';
import { correlatedGroups, type CorrelatedGroup } from './correlation';
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

/** Largest step of the difference quotients against the input, how many are tried, and where each looks. */
const largestStep = 0.25;
const stepCount = 7;
const offsets = [-2, -1, 1, 2] as const;

/**
 * Steps from a quarter of the input's size downwards, powers of two so that adding one to the input loses no digit:
 * near a limit, such as an albedo of 0.999, only the small ones are good, near zero only the large ones.
 */
function stepsOf({ value, distribution }: InputColumn): number[] {
	const most = largestStep * Math.max(Math.abs(value), Math.min(distribution.standardUncertainty, 1e300));
	if (!(most > 1e-290)) return [];
	let step = 1;
	while (step > most) step /= 2;
	while (step * 2 <= most) step *= 2;
	const steps: number[] = [];
	for (let i = 0; i < stepCount && step > 1e-290; i++, step /= 16) steps.push(step);
	return steps;
}

interface Quotient {
	slope: number;
	/** What rounding alone may do to it. */
	rounding: number;
	central: boolean;
}

/** Difference quotient over five points where all are finite, else over three on the finite side, else none. */
function quotient([a, b, c, d]: readonly number[], at: number, h: number): Quotient | undefined {
	const [m2, m1, p1, p2] = [a, b, c, d] as [number, number, number, number];
	// Grouped so that a function that does not move at all has the slope zero exactly.
	const central = (8 * (p1 - m1) - (p2 - m2)) / (12 * h);
	const rounding = (2.3e-16 * Math.max(Math.abs(p1), Math.abs(m1), Math.abs(at))) / h;
	if (Number.isFinite(central)) return { slope: central, rounding, central: true };
	for (const slope of [(4 * (p1 - at) - (p2 - at)) / (2 * h), (4 * (at - m1) - (at - m2)) / (2 * h)]) {
		if (Number.isFinite(slope)) {
			return { slope, rounding: (2.3e-16 * Math.abs(at + slope * h)) / h, central: false };
		}
	}
	return undefined;
}

/**
 * The slope on which two neighbouring steps agree best; NaN where there is none: a one-sided slope that grows with every
 * smaller step is endless.
 */
function derivative(quotients: readonly (Quotient | undefined)[]): number {
	let best = Infinity;
	let slope = NaN;
	for (const side of [true, false]) {
		for (let i = 0; i + 1 < quotients.length; i++) {
			const [wide, near] = [quotients[i], quotients[i + 1]];
			if (wide === undefined || near === undefined || wide.central !== side || near.central !== side)
				continue;
			const apart = Math.abs(wide.slope - near.slope) + wide.rounding;
			if (!(apart < best)) continue;
			best = apart;
			slope = !side && Math.abs(near.slope) > 1.3 * Math.abs(wide.slope) ? NaN : wide.slope;
		}
		if (best < Infinity) return slope;
	}
	return slope;
}

/**
 * Law of propagation of uncertainty with correlations (JCGM 100:2008, 5.1 and 5.2), partial derivatives by five-point
 * differences (relative error about 1e-12 where the model is smooth over a thousandth of the input); effective degrees
 * of freedom by Welch-Satterthwaite (G.4.1), kept fractional; the interval from the t or normal quantile.
 */
export function firstOrder(model: TrialModel, coverage: number): Record<string, FirstOrderOutput> {
	const uncertain = model.columns.filter(({ distribution }) => distribution.standardUncertainty > 0);
	const steps = uncertain.map(stepsOf);
	const n = 1 + 4 * steps.reduce((sum, list) => sum + list.length, 0);
	const columns = emptyColumns(
		model.columns.map(({ id }) => id),
		n
	);
	for (const { id, value } of model.columns) (columns[id] as Float64Array).fill(value);
	let place = 1;
	uncertain.forEach((column, k) => {
		const values = columns[column.id] as Float64Array;
		for (const h of steps[k] ?? []) for (const offset of offsets) values[place++] = column.value + offset * h;
	});
	const out = emptyColumns(model.outputs, n);
	model.evaluate(columns, n, out);
	const groups = correlatedGroups(model.columns, model.correlations);
	const results: Record<string, FirstOrderOutput> = {};
	for (const id of model.outputs) {
		const y = out[id] as Float64Array;
		const value = y[0] as number;
		const coefficients: Record<string, number> = {};
		let at = 1;
		uncertain.forEach((column, k) => {
			const slope = derivative(
				(steps[k] ?? []).map((h) => quotient([...y.subarray(at, (at += 4))], value, h))
			);
			if (!Number.isFinite(slope)) {
				throw new ProblemError(
					'no-derivative',
					`${id} has no finite slope in ${column.id} at this value, so its uncertainty cannot be propagated linearly. Move the value off the limit or leave its uncertainty out.`,
					`${column.path}/value`
				);
			}
			coefficients[column.id] = slope;
		});
		results[id] = {
			value,
			coefficients,
			...combine(model, uncertain, groups, coefficients, value, coverage)
		};
	}
	return results;
}

/**
 * Welch-Satterthwaite over parts that are independent of each other: single inputs, and groups of correlated ones, for
 * which G.4.1 does not hold; a group as a whole has at least the fewest degrees of freedom within it.
 */
function combine(
	model: TrialModel,
	uncertain: readonly InputColumn[],
	groups: readonly CorrelatedGroup[],
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
	const grouped = new Set(groups.flatMap(({ columns }) => columns));
	const parts = [
		...uncertain.filter((column) => !grouped.has(column)).map((column) => [column]),
		...groups.map(({ columns }) => columns)
	];
	let variance = 0;
	let weighted = 0;
	for (const part of parts) {
		let square = 0;
		let degrees = Infinity;
		for (const { id, degreesOfFreedom } of part) {
			const c = contribution.get(id) as number;
			square += c * c;
			if (c !== 0) degrees = Math.min(degrees, degreesOfFreedom);
		}
		if (part.length > 1) {
			const ids = new Set(part.map(({ id }) => id));
			for (const { a, b, coefficient } of model.correlations) {
				if (ids.has(a)) square += 2 * coefficient * (contribution.get(a) ?? 0) * (contribution.get(b) ?? 0);
			}
		}
		square = Math.max(square, 0);
		variance += square;
		weighted += (square * square) / degrees;
	}
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
