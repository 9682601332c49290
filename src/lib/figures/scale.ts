/** A linear axis: round ends, round ticks, and the decimals its labels need. */
export interface AxisScale {
	low: number;
	high: number;
	ticks: number[];
	decimals: number;
}

/** 10 to a whole power, exactly as the language reads it. */
function powerOfTen(exponent: number): number {
	return Number(`1e${exponent}`);
}

function exponentOf(value: number): number {
	return Number(value.toExponential().split('e')[1]);
}

/** The step among 1, 2, 2.5 and 5 times a power of ten that gives at most `count` intervals over `span`. */
function roundStep(span: number, count: number): { step: number; decimals: number } {
	const raw = span / count;
	const exponent = exponentOf(raw);
	for (const [factor, extra] of [
		[1, 0],
		[2, 0],
		[2.5, 1],
		[5, 0],
		[10, -1]
	] as const) {
		const step = factor * powerOfTen(exponent);
		if (step >= raw * (1 - 1e-9)) return { step, decimals: Math.max(0, extra - exponent) };
	}
	return { step: 10 * powerOfTen(exponent), decimals: Math.max(0, -exponent - 1) };
}

/** A span below this is none: no figure shows anything so small. */
const smallest = 1e-12;

/**
 * An axis over the given numbers. `round` widens the ends to the next tick; without it the ends are the data's own,
 * as suits the axis that a curve is drawn over. Flat data gets an axis of one unit around it.
 */
export function axisScale(values: readonly number[], options: { ticks: number; round: boolean }): AxisScale {
	const finite = values.filter((value) => Number.isFinite(value));
	let low = finite.reduce((a, b) => Math.min(a, b), Infinity);
	let high = finite.reduce((a, b) => Math.max(a, b), -Infinity);
	if (finite.length === 0) [low, high] = [0, 1];
	const size = Math.max(Math.abs(low), Math.abs(high));
	if (high - low <= Math.max(size * 1e-12, smallest)) {
		const margin = size <= smallest ? 1 : size * 0.05;
		low -= margin;
		high += margin;
	}
	const { step, decimals } = roundStep(high - low, options.ticks);
	const slack = 1e-9;
	if (options.round) {
		low = Math.floor(low / step + slack) * step;
		high = Math.ceil(high / step - slack) * step;
	}
	const ticks: number[] = [];
	const first = Math.ceil(low / step - slack);
	const last = Math.floor(high / step + slack);
	for (let i = first; i <= last; i += 1) ticks.push(Number((i * step).toFixed(decimals)));
	return { low, high, ticks, decimals };
}

/** Length in pixels along an axis of `length` pixels. */
export function position(scale: AxisScale, value: number, length: number): number {
	return ((value - scale.low) / (scale.high - scale.low)) * length;
}
