import { selectRank } from './select-rank';

/** A list of numbers that grows; plain arrays of doubles cost twice the memory. */
class NumberList {
	private values = new Float64Array(1024);
	length = 0;

	reserve(more: number): Float64Array {
		if (this.length + more > this.values.length) {
			const larger = new Float64Array(Math.max(this.length + more, this.values.length * 2));
			larger.set(this.values.subarray(0, this.length));
			this.values = larger;
		}
		return this.values;
	}

	append(more: Float64Array): void {
		this.reserve(more.length).set(more, this.length);
		this.length += more.length;
	}

	copy(): Float64Array {
		return this.values.slice(0, this.length);
	}
}

/** Sums by block (zero for blocks of others) and kept values, in no order. */
export interface TallyState {
	sums: Float64Array;
	squares: Float64Array;
	count: number;
	atOrBelow: number;
	lows: Float64Array;
	highs: Float64Array;
}

/** Bounds outside which values are kept for the ends of an interval. */
export interface Pivots {
	low: number;
	high: number;
}

/** Thrown where too few values were kept; the run is repeated with wider pivots. */
export class TooFewKept extends Error {}

/** Running sums and tails of one output. Sums are kept by block and added in block order at the end. */
export class Tally {
	readonly sums: Float64Array;
	readonly squares: Float64Array;
	count = 0;
	/** Values at or below the watched level. */
	atOrBelow = 0;
	private readonly lows = new NumberList();
	private readonly highs = new NumberList();
	private pivots: Pivots | undefined;

	/**
	 * @param centre value at the best estimates, from which the sums are taken so that they lose no digits
	 * @param watched a level whose share of trials is asked for
	 */
	constructor(
		blocks: number,
		private readonly centre: number,
		private readonly watched: number | undefined
	) {
		this.sums = new Float64Array(blocks);
		this.squares = new Float64Array(blocks);
	}

	/** From here on only values outside the pivots are kept; what was kept before is sifted. */
	keepOutside(pivots: Pivots): void {
		const before = this.lows.copy();
		this.lows.length = 0;
		this.pivots = pivots;
		this.keep(before, before.length);
	}

	add(block: number, values: Float64Array, n: number): void {
		const { centre } = this;
		let sum0 = 0;
		let sum1 = 0;
		let sum2 = 0;
		let sum3 = 0;
		let square0 = 0;
		let square1 = 0;
		let square2 = 0;
		let square3 = 0;
		const whole = n - (n % 4);
		for (let i = 0; i < whole; i += 4) {
			const a = (values[i] as number) - centre;
			const b = (values[i + 1] as number) - centre;
			const c = (values[i + 2] as number) - centre;
			const d = (values[i + 3] as number) - centre;
			sum0 += a;
			sum1 += b;
			sum2 += c;
			sum3 += d;
			square0 += a * a;
			square1 += b * b;
			square2 += c * c;
			square3 += d * d;
		}
		for (let i = whole; i < n; i++) {
			const a = (values[i] as number) - centre;
			sum0 += a;
			square0 += a * a;
		}
		this.sums[block] = sum0 + sum1 + (sum2 + sum3);
		this.squares[block] = square0 + square1 + (square2 + square3);
		this.count += n;
		if (this.watched !== undefined) {
			const level = this.watched;
			let below = 0;
			for (let i = 0; i < n; i++) if ((values[i] as number) <= level) below++;
			this.atOrBelow += below;
		}
		this.keep(values, n);
	}

	private keep(values: Float64Array, n: number): void {
		const lows = this.lows.reserve(n);
		let low = this.lows.length;
		if (this.pivots === undefined) {
			lows.set(values.subarray(0, n), low);
			this.lows.length = low + n;
			return;
		}
		const highs = this.highs.reserve(n);
		let high = this.highs.length;
		const { low: lowPivot, high: highPivot } = this.pivots;
		for (let i = 0; i < n; i++) {
			const x = values[i] as number;
			if (x <= lowPivot) lows[low++] = x;
			if (x >= highPivot) highs[high++] = x;
		}
		this.lows.length = low;
		this.highs.length = high;
	}

	/** What another thread needs to take this tally over; plain data that survives a message. */
	state(): TallyState {
		return {
			sums: this.sums,
			squares: this.squares,
			count: this.count,
			atOrBelow: this.atOrBelow,
			lows: this.lows.copy(),
			highs: this.highs.copy()
		};
	}

	/** Takes over blocks that another thread did; both kept values outside the same pivots. */
	merge(state: TallyState): void {
		for (let i = 0; i < this.sums.length; i++) {
			this.sums[i] = (this.sums[i] as number) + (state.sums[i] as number);
			this.squares[i] = (this.squares[i] as number) + (state.squares[i] as number);
		}
		this.count += state.count;
		this.atOrBelow += state.atOrBelow;
		this.lows.append(state.lows);
		this.highs.append(state.highs);
	}

	/** Mean and standard deviation (over n - 1) of all trials. */
	moments(): { mean: number; standardUncertainty: number } {
		let sum = 0;
		let square = 0;
		for (let i = 0; i < this.sums.length; i++) {
			sum += this.sums[i] as number;
			square += this.squares[i] as number;
		}
		const shift = sum / this.count;
		const variance = (square - sum * shift) / (this.count - 1);
		return { mean: this.centre + shift, standardUncertainty: Math.sqrt(Math.max(variance, 0)) };
	}

	/** The kept order statistics; of values that were all kept only `tail` at each end are put in order. */
	order(tail = Infinity): OrderStatistics {
		if (this.pivots === undefined && 2 * tail < this.count) {
			const { lows, highs } = bothTails(this.lows.copy(), tail);
			return new OrderStatistics(this.count, lows, highs);
		}
		return new OrderStatistics(this.count, this.lows.copy().sort(), this.highs.copy().sort());
	}
}

/** The lowest and the highest `count` values, each in order: selection and two short sorts instead of a long one. */
function bothTails(values: Float64Array, count: number): { lows: Float64Array; highs: Float64Array } {
	selectRank(values, count - 1);
	const lows = values.slice(0, count).sort();
	selectRank(values, values.length - count);
	return { lows, highs: values.slice(values.length - count).sort() };
}

/** Order statistics of `count` values of which the lowest and the highest are known. */
export class OrderStatistics {
	constructor(
		readonly count: number,
		private readonly lows: Float64Array,
		private readonly highs: Float64Array
	) {}

	/** The value of rank `rank`, from 1. */
	at(rank: number): number {
		if (rank <= this.lows.length) return this.lows[rank - 1] as number;
		const fromTop = this.count - rank;
		if (fromTop < this.highs.length) return this.highs[this.highs.length - 1 - fromTop] as number;
		throw new TooFewKept();
	}
}
