import { ProblemError } from '../calculation/problem';
import { sha256Hex } from '../exact/sha256';
import type { Range } from '../methods/types';
import { correlatedGroups, type CorrelatedGroup } from './correlation';
import { Stream } from './random/stream';
import { normalCdf } from './special/normal';
import { blockSize, type InputColumn, type TrialModel } from './trial-model';

const mostRedraws = 100_000;

export function outside(x: number, { low, high, lowOpen, highOpen }: Range): boolean {
	if (low !== null && (x < low || (lowOpen === true && x === low))) return true;
	return high !== null && (x > high || (highOpen === true && x === high));
}

function mayLeave({ distribution, domain }: InputColumn): boolean {
	return outside(distribution.low, domain) || outside(distribution.high, domain);
}

/** Keeps a probability inside the open unit interval. */
function inside(p: number): number {
	return p < 1e-300 ? 1e-300 : p > 1 - 1.2e-16 ? 1 - 1.2e-16 : p;
}

/**
 * Draws trials block by block. Each (seed, input, block) has a stream of its own, so a block comes out the same
 * whoever draws it and in whatever order.
 */
export class Sampler {
	/** The block drawn last; exact inputs are filled once. */
	readonly columns: Record<string, Float64Array> = {};
	private readonly seed: string;
	private readonly alone: readonly InputColumn[];
	private readonly groups: readonly CorrelatedGroup[];
	private readonly bounded: readonly InputColumn[];
	private readonly scratch: Float64Array[] = [];

	private readonly flags = new Uint8Array(blockSize);

	constructor(
		private readonly model: TrialModel,
		seed: string
	) {
		this.seed = sha256Hex(seed);
		this.groups = correlatedGroups(model.columns, model.correlations);
		const grouped = new Set(this.groups.flatMap(({ columns }) => columns));
		const uncertain = model.columns.filter(({ distribution }) => distribution.standardUncertainty > 0);
		this.alone = uncertain.filter((column) => !grouped.has(column));
		this.bounded = uncertain.filter(mayLeave);
		for (const { id, value } of model.columns) this.columns[id] = new Float64Array(blockSize).fill(value);
		const largest = this.groups.reduce((most, { columns }) => Math.max(most, columns.length), 0);
		for (let i = 0; i < largest; i++) this.scratch.push(new Float64Array(blockSize));
	}

	/** Draws the first `n` trials of a block and returns how many draws were made again. */
	draw(block: number, n: number): number {
		this.fill(
			(id) => new Stream(`${this.seed}/input/${id}/${block}`),
			n,
			(id) => this.columns[id] as Float64Array
		);
		return this.bounded.length === 0 && this.model.reject === undefined ? 0 : this.redraw(block, n);
	}

	private fill(stream: (id: string) => Stream, n: number, target: (id: string) => Float64Array): void {
		for (const { id, distribution } of this.alone) distribution.fill(stream(id), target(id), n);
		for (const { columns, factor } of this.groups) {
			const size = columns.length;
			columns.forEach(({ id }, k) => stream(id).fillNormal(this.scratch[k] as Float64Array, n, 0, 1));
			columns.forEach(({ id, distribution }, k) => {
				const out = target(id);
				out.fill(0, 0, n);
				for (let j = 0; j <= k; j++) {
					const weight = factor[k * size + j] as number;
					const source = this.scratch[j] as Float64Array;
					for (let i = 0; i < n; i++) out[i] = (out[i] as number) + weight * (source[i] as number);
				}
				const { normal } = distribution;
				if (normal !== undefined) {
					for (let i = 0; i < n; i++) out[i] = normal.mean + normal.deviation * (out[i] as number);
				} else {
					for (let i = 0; i < n; i++) out[i] = distribution.quantile(inside(normalCdf(out[i] as number)));
				}
			});
		}
	}

	/** Trials that the model itself finds impossible. */
	private rejected(columns: Record<string, Float64Array>, n: number): number[] {
		if (this.model.reject === undefined) return [];
		this.flags.fill(0, 0, n);
		this.model.reject(columns, n, this.flags);
		const trials: number[] = [];
		for (let i = 0; i < n; i++) if (this.flags[i] === 1) trials.push(i);
		return trials;
	}

	/** A trial with any input outside its domain is drawn again as a whole, from one more stream of the block. */
	private redraw(block: number, n: number): number {
		const bad = new Set<number>();
		for (const { id, domain } of this.bounded) {
			const column = this.columns[id] as Float64Array;
			for (let i = 0; i < n; i++) if (outside(column[i] as number, domain)) bad.add(i);
		}
		for (const trial of this.rejected(this.columns, n)) bad.add(trial);
		if (bad.size === 0) return 0;
		const stream = new Stream(`${this.seed}/redraw/${block}`);
		const one: Record<string, Float64Array> = {};
		for (const { id, value } of this.model.columns) one[id] = Float64Array.of(value);
		let count = 0;
		for (const trial of [...bad].sort((a, b) => a - b)) {
			let fits = false;
			while (!fits) {
				if (++count > mostRedraws)
					throw tooOftenOutside(this.bounded[0] ?? (this.model.columns[0] as InputColumn));
				this.fill(
					() => stream,
					1,
					(id) => one[id] as Float64Array
				);
				fits =
					!this.bounded.some(({ id, domain }) => outside(one[id]?.[0] as number, domain)) &&
					this.rejected(one, 1).length === 0;
			}
			for (const column of [...this.alone, ...this.groups.flatMap(({ columns }) => columns)]) {
				(this.columns[column.id] as Float64Array)[trial] = one[column.id]?.[0] as number;
			}
		}
		return count;
	}
}

function tooOftenOutside({ id, path }: InputColumn): ProblemError {
	return new ProblemError(
		'outside-domain',
		`Nearly every trial draws ${id} outside what is physically possible. Narrow its distribution or move its value.`,
		`${path}/distribution`
	);
}
