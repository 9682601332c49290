import type { DistributionType } from '../../calculation/types';
import type { Stream } from '../random/stream';

/** A distribution ready to draw from, in the unit it was built in. */
export interface Distribution {
	/** Standard uncertainty that JCGM 100 attaches to it; 0 for an exact value. */
	standardUncertainty: number;
	/** Ends of the support. */
	low: number;
	high: number;
	fill(stream: Stream, out: Float64Array, n: number): void;
	/** Inverse of the distribution function, for 0 < p < 1. */
	quantile(p: number): number;
	/** Present for a normal distribution, which needs no quantile to be correlated. */
	normal?: { mean: number; deviation: number };
}

export type Parameters = Readonly<Record<string, number | readonly number[]>>;

/** What a parameter is, which decides how it goes from one unit to another. */
export type ParameterKind = 'difference' | 'point' | 'points' | 'pure' | 'pures';

export interface ParameterFault {
	parameter: string;
	message: string;
}

/** One type of distribution. `ways` lists the sets of parameters by which it may be given. */
export interface DistributionFamily {
	type: DistributionType;
	ways: readonly (readonly string[])[];
	fault(parameters: Parameters, value: number): ParameterFault | undefined;
	build(parameters: Parameters, value: number): Distribution;
}

export const parameterKinds: Readonly<Record<string, ParameterKind>> = {
	standardUncertainty: 'difference',
	halfWidth: 'difference',
	inexactness: 'difference',
	low: 'point',
	mode: 'point',
	high: 'point',
	values: 'points',
	weights: 'pures',
	alpha: 'pure',
	beta: 'pure',
	geometricStandardDeviation: 'pure',
	degreesOfFreedom: 'pure'
};

/** The named parameter as a number; the check has seen to it that it is one. */
export function number(parameters: Parameters, name: string): number {
	return parameters[name] as number;
}

export function below(parameters: Parameters, name: string, least: number): ParameterFault | undefined {
	if (number(parameters, name) >= least) return undefined;
	return { parameter: name, message: `must be ${least} or more` };
}

/** Faults of a range that must hold the best estimate. */
export function rangeFault(parameters: Parameters, value: number): ParameterFault | undefined {
	const low = number(parameters, 'low');
	const high = number(parameters, 'high');
	if (low > high) return { parameter: 'low', message: 'must not lie above high' };
	if (value < low) return { parameter: 'low', message: 'must not lie above the value itself' };
	if (value > high) return { parameter: 'high', message: 'must not lie below the value itself' };
	return undefined;
}
