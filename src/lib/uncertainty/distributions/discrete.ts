import { exactly } from './exact';
import type { DistributionFamily, Parameters } from './types';

function lists(parameters: Parameters): { values: readonly number[]; weights: readonly number[] } {
	return { values: parameters.values as readonly number[], weights: parameters.weights as readonly number[] };
}

/** Given values with given weights, which are rescaled to sum to 1. */
export const discrete: DistributionFamily = {
	type: 'discrete',
	ways: [['values', 'weights']],
	fault(parameters, value) {
		const { values, weights } = lists(parameters);
		if (values.length === 0 || values.length > 10_000) {
			return { parameter: 'values', message: 'must hold between 1 and 10 000 numbers' };
		}
		if (weights.length !== values.length) {
			return { parameter: 'weights', message: 'must hold one weight for each value' };
		}
		if (weights.some((weight) => weight < 0) || !weights.some((weight) => weight > 0)) {
			return { parameter: 'weights', message: 'must not be negative, and one must lie above zero' };
		}
		if (!Number.isFinite(weights.reduce((sum, weight) => sum + weight, 0))) {
			return { parameter: 'weights', message: 'are too large to add up' };
		}
		const possible = values.filter((_, i) => (weights[i] as number) > 0);
		if (possible.every((x) => x === possible[0]) && possible[0] !== value) {
			return { parameter: 'values', message: 'must be the value itself where only one is possible' };
		}
		return undefined;
	},
	build(parameters, value) {
		const { values, weights } = lists(parameters);
		const order = values.map((_, i) => i).sort((i, j) => (values[i] as number) - (values[j] as number));
		const sorted = order.map((i) => values[i] as number);
		const total = weights.reduce((sum, weight) => sum + weight, 0);
		let sum = 0;
		const cumulative = order.map((i) => (sum += (weights[i] as number) / total));
		const shares = order.map((i) => (weights[i] as number) / total);
		const mean = sorted.reduce((before, x, i) => before + x * (shares[i] as number), 0);
		const variance = sorted.reduce(
			(before, x, i) => before + (x - mean) * (x - mean) * (shares[i] as number),
			0
		);
		if (variance === 0) return exactly(sorted[shares.findIndex((share) => share > 0)] ?? value);
		const last = shares.reduce((before, share, i) => (share > 0 ? i : before), 0);
		const quantile = (p: number): number => {
			let low = 0;
			let high = last;
			while (low < high) {
				const middle = (low + high) >> 1;
				if ((cumulative[middle] as number) < p) low = middle + 1;
				else high = middle;
			}
			return sorted[low] as number;
		};
		return {
			standardUncertainty: Math.sqrt(variance),
			low: sorted[shares.findIndex((share) => share > 0)] as number,
			high: sorted[last] as number,
			quantile,
			fill(stream, out, n) {
				stream.fillUniform(out, n, 0, 1);
				for (let i = 0; i < n; i++) out[i] = quantile(out[i] as number);
			}
		};
	}
};
