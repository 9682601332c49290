import type { Correlation } from '../calculation/types';
import type { Columns, Range } from '../methods/types';
import type { Distribution } from './distributions/types';

/** Trials are drawn and evaluated this many at a time: a block stays in the processor's first cache. */
export const blockSize = 4096;

/** One quantity that is drawn, in SI. */
export interface InputColumn {
	id: string;
	/** Place in the request, for a fault that only shows while drawing. */
	path: string;
	/** Best estimate. */
	value: number;
	distribution: Distribution;
	/** Effective degrees of freedom of its standard uncertainty; Infinity where none are stated. */
	degreesOfFreedom: number;
	domain: Range;
}

/** What an uncertainty is propagated through, be it whatever function of columns. */
export interface TrialModel {
	columns: readonly InputColumn[];
	correlations: readonly Correlation[];
	outputs: readonly string[];
	evaluate(inputs: Columns, n: number, out: Record<string, Float64Array>): void;
	/** Flags trials whose intermediate quantities are physically impossible, where there are any to look at. */
	reject?(inputs: Columns, n: number, flags: Uint8Array): void;
}

/** The best estimates as columns of one entry. */
export function bestEstimates(model: TrialModel): Record<string, Float64Array> {
	return Object.fromEntries(model.columns.map(({ id, value }) => [id, Float64Array.of(value)]));
}

/** Empty columns of `n` entries by id. */
export function emptyColumns(ids: readonly string[], n: number): Record<string, Float64Array> {
	return Object.fromEntries(ids.map((id) => [id, new Float64Array(n)]));
}

/** The outputs at the best estimates. */
export function evaluateOnce(model: TrialModel): Record<string, number> {
	const out = emptyColumns(model.outputs, 1);
	model.evaluate(bestEstimates(model), 1, out);
	return Object.fromEntries(model.outputs.map((id) => [id, out[id]?.[0] as number]));
}
