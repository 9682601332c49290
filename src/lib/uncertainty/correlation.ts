import { ProblemError } from '../calculation/problem';
import type { Correlation } from '../calculation/types';
import type { InputColumn } from './trial-model';

/** Columns that are drawn together: `factor` is the lower Cholesky factor of their correlations, row by row. */
export interface CorrelatedGroup {
	columns: readonly InputColumn[];
	factor: Float64Array;
}

const slack = 1e-9;

/**
 * Lower Cholesky factor of a positive semidefinite correlation matrix; a pivot that vanishes leaves its column zero.
 * @returns the pair of indices whose coefficient the others do not allow, if there is one
 */
function factorise(matrix: Float64Array, size: number): Float64Array | [number, number] {
	const factor = new Float64Array(size * size);
	for (let j = 0; j < size; j++) {
		for (let i = j; i < size; i++) {
			let rest = matrix[i * size + j] as number;
			for (let k = 0; k < j; k++) rest -= (factor[i * size + k] as number) * (factor[j * size + k] as number);
			const pivot = factor[j * size + j] as number;
			if (i === j) {
				if (rest < -slack) return [largestPartner(matrix, size, j), j];
				factor[i * size + j] = rest > slack ? Math.sqrt(rest) : 0;
			} else if (pivot > 0) {
				factor[i * size + j] = rest / pivot;
			} else if (Math.abs(rest) > 1e-6) {
				return [j, i];
			}
		}
	}
	return factor;
}

/** The earlier index with which `index` is most strongly correlated. */
function largestPartner(matrix: Float64Array, size: number, index: number): number {
	let best = 0;
	for (let i = 1; i < index; i++) {
		if (Math.abs(matrix[index * size + i] as number) > Math.abs(matrix[index * size + best] as number))
			best = i;
	}
	return best;
}

/**
 * The groups of correlated inputs, which are drawn by a Gaussian copula: coefficients between normal inputs are met
 * exactly, between others they are those of the underlying normals (for two rectangular inputs the linear
 * correlation is then up to 0.018 smaller).
 * @throws ProblemError naming a pair if no joint distribution has these coefficients
 */
export function correlatedGroups(
	columns: readonly InputColumn[],
	correlations: readonly Correlation[]
): CorrelatedGroup[] {
	const uncertain = new Map(
		columns
			.filter(({ distribution }) => distribution.standardUncertainty > 0)
			.map((column) => [column.id, column])
	);
	const active = correlations.filter(
		({ a, b, coefficient }) => coefficient !== 0 && uncertain.has(a) && uncertain.has(b)
	);
	const left = new Set(active.flatMap(({ a, b }) => [a, b]));
	const groups: CorrelatedGroup[] = [];
	for (const start of uncertain.keys()) {
		if (!left.has(start)) continue;
		const members = new Set([start]);
		for (const id of members) {
			for (const { a, b } of active) {
				if (a === id) members.add(b);
				if (b === id) members.add(a);
			}
		}
		for (const id of members) left.delete(id);
		const group = columns.filter(({ id }) => members.has(id));
		const size = group.length;
		const index = new Map(group.map(({ id }, i) => [id, i]));
		const matrix = new Float64Array(size * size);
		for (let i = 0; i < size; i++) matrix[i * size + i] = 1;
		for (const { a, b, coefficient } of active) {
			const i = index.get(a);
			const j = index.get(b);
			if (i === undefined || j === undefined) continue;
			matrix[i * size + j] = coefficient;
			matrix[j * size + i] = coefficient;
		}
		const factor = factorise(matrix, size);
		if (Array.isArray(factor)) {
			const [first, second] = factor.map((i) => group[i]?.id ?? '');
			const at = correlations.findIndex(
				({ a, b }) => (a === first && b === second) || (a === second && b === first)
			);
			throw new ProblemError(
				'correlations-impossible',
				`No quantities can have these correlations together; the coefficient between ${first} and ${second} contradicts the others. Lower it or state the missing ones.`,
				at < 0 ? '/correlations' : `/correlations/${at}/coefficient`
			);
		}
		groups.push({ columns: group, factor });
	}
	return groups;
}
