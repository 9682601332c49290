import type { OrderStatistics } from './tally';

export interface Ends {
	low: number;
	high: number;
}

/** Number of trials that an interval of the coverage holds (JCGM 101:2008, 7.7.1). */
export function coveredTrials(count: number, coverage: number): number {
	const product = coverage * count;
	const nearest = Math.round(product);
	return Math.abs(product - nearest) < 1e-6 ? nearest : Math.floor(product + 0.5);
}

/** Interval with equal shares of trials below and above it (JCGM 101:2008, 7.7.2). */
export function symmetricInterval(order: OrderStatistics, coverage: number): Ends {
	const q = coveredTrials(order.count, coverage);
	const r = Math.max(1, Math.floor((order.count - q + 1) / 2));
	return { low: order.at(r), high: order.at(r + q) };
}

/** Shortest interval with the coverage; the lowest of several equally short ones (JCGM 101:2008, 7.7.4). */
export function shortestInterval(order: OrderStatistics, coverage: number): Ends {
	const q = coveredTrials(order.count, coverage);
	let best: Ends = { low: order.at(1), high: order.at(1 + q) };
	for (let r = 2; r + q <= order.count; r++) {
		const low = order.at(r);
		const high = order.at(r + q);
		if (high - low < best.high - best.low) best = { low, high };
	}
	return best;
}
