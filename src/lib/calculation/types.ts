/**
 * The compute contract: what a request takes and a result gives. One shape for the command line, the API, the
 * form's live preview, the workers and the stored record. Plain JSON throughout: nothing here may hold a function,
 * a typed array or a date object.
 */

/** Distributions in the terms of JCGM 100 and JCGM 101. Every one may carry its effective degrees of freedom. */
export type DistributionSpec = (
	| { type: 'exact' }
	| { type: 'normal'; standardUncertainty: number }
	| { type: 'rectangular'; halfWidth: number }
	| { type: 'rectangular'; low: number; high: number }
	| { type: 'triangular'; halfWidth: number }
	| { type: 'triangular'; low: number; mode: number; high: number }
	| { type: 'trapezoidal'; halfWidth: number; beta: number }
	| { type: 'arcsine'; halfWidth: number }
	| { type: 'curvilinear-trapezoid'; halfWidth: number; inexactness: number }
	| { type: 'lognormal'; geometricStandardDeviation: number }
	| { type: 'students-t'; standardUncertainty: number; degreesOfFreedom: number }
	| { type: 'beta'; low: number; high: number; alpha: number; beta: number }
	| { type: 'exponential' }
	| { type: 'discrete'; values: number[]; weights: number[] }
) & { degreesOfFreedom?: number };

export type DistributionType = DistributionSpec['type'];

/** One input as given. `unit` left out means the input's own unit; `distribution` left out means exact. */
export interface InputGiven {
	value?: number | string;
	unit?: string;
	distribution?: DistributionSpec;
	/** Inputs with the same name here are one quantity: drawn once per trial. */
	shared?: string;
	/** Taken from another method's output, evaluated in the same trials. */
	from?: { method: string; inputs: Record<string, InputEntry>; options?: Options; output: string };
}

/** A cell of a table input: a bare number (exact, the column's own unit), a word or list, or an input as given. */
export type TableCell = number | string | string[] | InputGiven;
export type TableRow = Record<string, TableCell>;
export type InputEntry = InputGiven | TableRow[] | TableRow;

export type Options = Record<string, string | number>;

export interface Correlation {
	a: string;
	b: string;
	coefficient: number;
}

export interface Evaluation {
	propagation?: 'none' | 'first-order' | 'monte-carlo';
	trials?: number | 'adaptive';
	/** Significant digits of the standard uncertainty for adaptive trials (JCGM 101 clause 7.9). */
	digits?: 1 | 2;
	seed?: string;
	coverage?: number;
	interval?: 'symmetric' | 'shortest';
	outputs?: string[];
	sensitivity?: 'variance-based';
}

/** What a stated number or a result averages over. `point` is the hottest or a named place, not an average. */
export type Area = 'point' | 'sunlit-hemisphere' | 'whole-sphere' | 'site' | 'not-stated';
export type Period = 'instant' | 'day' | 'year' | 'orbit' | 'not-stated';
export type TemperatureKind = 'effective' | 'equilibrium' | 'skin' | 'radiometric' | 'air-2m' | 'not-stated';

export interface ClaimComparison {
	kind: 'claim';
	value: number;
	unit?: string;
	standardUncertainty?: number;
	output: string;
	area?: Area;
	period?: Period;
	temperatureKind?: TemperatureKind;
	decimals?: number;
	citation?: string;
}

export interface LimitComparison {
	kind: 'limit';
	value: number;
	unit?: string;
	output: string;
	sense: 'at-most' | 'at-least';
	/** `risk`: the largest probability of accepting wrongly that the guard band allows. */
	rule: { type: 'simple-acceptance' } | { type: 'guard-band'; risk: number };
	source?: string;
}

export type Comparison = ClaimComparison | LimitComparison;

export interface ComputeRequest {
	method: string;
	inputs: Record<string, InputEntry>;
	options?: Options;
	correlations?: Correlation[];
	evaluation?: Evaluation;
	compareWith?: Comparison;
	solveFor?: { input: string; output: string; target: { value: number; unit?: string } };
}

/** An input as the result lists it: in the input's own unit, with what was given or taken by default. */
export interface InputUsed {
	value: number | string;
	unit: string;
	standardUncertainty?: number;
	distribution?: DistributionSpec;
	given: boolean;
	/** For a default: where its value comes from. */
	source?: string;
}

export interface Interval {
	low: number;
	high: number;
	coverage: number;
}

export interface SensitivityEntry {
	/** Output unit per input unit. */
	coefficient: number;
	/** |coefficient| times the input's standard uncertainty. */
	contribution: number;
	/** contribution squared over the combined variance. */
	share: number;
	firstOrder?: number;
	total?: number;
}

export interface OutputResult {
	value: number;
	unit: string;
	mean?: number;
	standardUncertainty?: number;
	effectiveDegreesOfFreedom?: number;
	interval?: Interval;
	sensitivity?: Record<string, SensitivityEntry>;
}

/** A curve family over one axis; `low` and `high` bound the coverage band where an uncertainty was propagated. */
export interface Series {
	x: { id: string; name: string; unit: string; values: number[] };
	curves: {
		id: string;
		name: string;
		unit: string;
		role: 'sunlit' | 'shade' | 'neutral';
		values: number[];
		low?: number[];
		high?: number[];
	}[];
}

export type CautionLevel = 'note' | 'caution' | 'stop';

export interface Caution {
	code: string;
	level: CautionLevel;
	text: string;
	/** The figures that triggered it, by name. */
	figures?: Record<string, number>;
	source?: string;
	inputs?: string[];
	outputs?: string[];
}

export interface ClaimFinding {
	kind: 'claim';
	output: string;
	stated: { value: number; unit: string; standardUncertainty?: number };
	result: { value: number; unit: string; standardUncertainty: number };
	difference: number;
	differenceUncertainty: number;
	/** E_n and zeta of ISO 13528; left out where the uncertainty they divide by is zero. */
	normalisedError?: number;
	zetaScore?: number;
	verdict: 'consistent' | 'inconsistent' | 'not-comparable';
	reasons: string[];
}

export interface LimitFinding {
	kind: 'limit';
	output: string;
	limit: { value: number; unit: string; sense: 'at-most' | 'at-least'; source?: string };
	result: { value: number; unit: string; standardUncertainty: number };
	rule: LimitComparison['rule'];
	guardBand: number;
	acceptanceLimit: number;
	/** Probability of conformity, JCGM 106. */
	probabilityOfConformity: number;
	/** Specific consumer's risk where accepted, specific producer's risk where rejected. */
	risk: { kind: 'consumer' | 'producer'; probability: number };
	verdict: 'conforms' | 'does-not-conform' | 'undecided';
	reasons: string[];
}

export type Finding = ClaimFinding | LimitFinding;

export interface ComputeResult {
	method: { id: string; version: string };
	inputs: Record<string, InputUsed | TableRow[]>;
	options: Options;
	outputs: Record<string, OutputResult>;
	series: Record<string, Series>;
	cautions: Caution[];
	evaluation: {
		propagation: 'none' | 'first-order' | 'monte-carlo';
		trials?: number;
		seed?: string;
		coverage?: number;
		interval?: 'symmetric' | 'shortest';
		redrawn?: number;
		converged?: boolean;
	};
	finding?: Finding;
	/** `sha256:` and 64 hex digits over the canonical JSON (RFC 8785) of `{request, result}` without this key. */
	record: string;
}

/** What is stored, attached to a report and recomputed by a verifier. */
export interface ComputationRecord {
	request: ComputeRequest;
	result: ComputeResult;
}
