import type { CheckedRequest } from '../calculation/check-request';
import type { Propagated } from '../calculation/list-outputs';
import type { Caution, OutputResult } from '../calculation/types';
import type { OutputSpec } from '../methods/types';

/** What a rule may look at once everything is computed. */
export interface RuleContext {
	checked: CheckedRequest;
	/** In their own units. */
	outputs: Readonly<Record<string, OutputResult>>;
	/** In SI. */
	propagated: Propagated;
}

export type Rule = (context: RuleContext) => Caution[];

/** The claim that the request compares with, and the output it is compared to. */
export function claimOf({ checked }: RuleContext) {
	const { comparison, model } = checked;
	if (comparison?.kind !== 'claim') return undefined;
	const output = model.outputs.find(({ id }) => id === comparison.output);
	return output === undefined ? undefined : { claim: comparison, output };
}

export function specOf({ checked }: RuleContext, id: string): OutputSpec | undefined {
	return checked.model.outputs.find((output) => output.id === id);
}

/**
 * Whether a claim leaves open what it stands for: it says so, or says nothing. Of a bare number, such as an index, only
 * the first is asked.
 */
export function isUnstated(stated: string | undefined, { quantity }: OutputSpec): boolean {
	return stated === 'not-stated' || (stated === undefined && quantity !== 'number');
}

/** The best figure for an output: the mean of the trials where there were any, else the value. */
export function estimateOf({ mean, value }: OutputResult): number {
	return mean ?? value;
}

export const areaWords = {
	point: 'a point',
	'sunlit-hemisphere': 'the sunlit half',
	'whole-sphere': 'the whole body',
	site: 'one site',
	'not-stated': 'an area that is not stated'
} as const;

export const periodWords = {
	instant: 'one moment',
	day: 'one day',
	year: 'one year',
	orbit: 'one orbit',
	'not-stated': 'a time that is not stated'
} as const;

export const kindWords = {
	effective: 'an effective temperature',
	equilibrium: 'an equilibrium temperature',
	skin: 'the temperature of the surface itself',
	radiometric: 'a temperature read from radiation',
	'air-2m': 'the temperature of the air at 2 m',
	'not-stated': 'a kind of temperature that is not stated'
} as const;
