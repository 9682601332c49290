import type { Distribution, DistributionFamily } from './types';

export function exactly(value: number): Distribution {
	return {
		standardUncertainty: 0,
		low: value,
		high: value,
		fill: (_stream, out, n) => {
			out.fill(value, 0, n);
		},
		quantile: () => value
	};
}

/** A value without uncertainty. */
export const exact: DistributionFamily = {
	type: 'exact',
	ways: [[]],
	fault: () => undefined,
	build: (_parameters, value) => exactly(value)
};
