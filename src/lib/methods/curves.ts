import type { Columns } from './types';

/** `count` values from `low` to `high`, both included. */
export function evenly(low: number, high: number, count: number): number[] {
	return Array.from({ length: count }, (_, i) => low + ((high - low) * i) / (count - 1));
}

/** The columns with one of them held at a value. */
export class HeldColumns {
	private column = new Float64Array(0);

	constructor(private readonly id: string) {}

	at(value: number, inputs: Columns, n: number): Columns {
		if (this.column.length < n) this.column = new Float64Array(n);
		this.column.fill(value, 0, n);
		return { ...inputs, [this.id]: this.column };
	}
}

/** The columns with one of them scaled by a factor. */
export class ScaledColumns {
	private column = new Float64Array(0);

	constructor(private readonly id: string) {}

	by(factor: number, inputs: Columns, n: number): Columns {
		if (this.column.length < n) this.column = new Float64Array(n);
		const source = inputs[this.id] as Float64Array;
		for (let i = 0; i < n; i++) this.column[i] = (source[i] as number) * factor;
		return { ...inputs, [this.id]: this.column };
	}
}

/** Scratch columns that an evaluation fills and a curve does not show. */
export class Scratch {
	private columns: Record<string, Float64Array> = {};

	constructor(private readonly ids: readonly string[]) {}

	/** `shown` where it has a column, else scratch of at least `n` entries. */
	beside(shown: Record<string, Float64Array>, n: number): Record<string, Float64Array> {
		const all: Record<string, Float64Array> = {};
		for (const id of this.ids) {
			const own = this.columns[id];
			if (own === undefined || own.length < n) this.columns[id] = new Float64Array(n);
			all[id] = shown[id] ?? (this.columns[id] as Float64Array);
		}
		return all;
	}
}
