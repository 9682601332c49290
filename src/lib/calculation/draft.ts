/**
 * A calculation as it stands in the form: everything typed, as typed, so that a wrong entry survives a reload and a
 * server restart. `toRequest` (./to-request.ts) turns it into a compute request or into a list of faults by field.
 */
import type { Area, Period, TemperatureKind } from './types';

export type QuestionKind = 'find-value' | 'check-claim' | 'test-limit';

export type SpreadKind =
	| 'exact'
	| 'normal'
	| 'rectangular'
	| 'rectangular-bounds'
	| 'triangular'
	| 'triangular-bounds'
	| 'trapezoidal'
	| 'arcsine'
	| 'curvilinear-trapezoid'
	| 'lognormal'
	| 'students-t'
	| 'beta'
	| 'exponential'
	| 'discrete';

export type SourceKind = 'default' | 'citation' | 'file' | 'judgement' | 'not-sure';

export interface AssumptionSource {
	kind: SourceKind | null;
	/** Citation text, reason for a judgement, or place in the file (page, row). */
	text: string;
	evidenceId: string | null;
	/** For a value off a data sheet. */
	valueKind?: 'new' | 'aged' | 'not-stated';
	spreadMeans?: 'standard-uncertainty' | 'tolerance' | 'not-stated';
}

export interface AssumptionDraft {
	value: string;
	unit: string;
	spread: SpreadKind;
	/** Parameters of the distribution by the contract's names, as typed, in `unit`. */
	spreadValues: Record<string, string>;
	source: AssumptionSource;
	note: string;
}

export interface ClaimDraft {
	value: string;
	unit: string;
	standardUncertainty: string;
	output: string;
	area: Area;
	period: Period;
	temperatureKind: TemperatureKind;
	decimals: string;
	quotation: string;
	citation: string;
}

export interface LimitDraft {
	value: string;
	unit: string;
	output: string;
	sense: 'at-most' | 'at-least';
	rule: 'simple-acceptance' | 'guard-band';
	risk: string;
	source: string;
}

export interface CalculationDraft {
	kind: QuestionKind;
	method: string | null;
	assumptions: Record<string, AssumptionDraft>;
	options: Record<string, string>;
	correlations: { a: string; b: string; coefficient: string }[];
	evaluation: {
		propagation: 'monte-carlo' | 'first-order';
		trials: string;
		seed: string;
		coverage: string;
		interval: 'symmetric' | 'shortest';
	};
	claim: ClaimDraft | null;
	limit: LimitDraft | null;
	/** The unit in which temperatures are shown; every figure is computed in kelvin. */
	temperatureUnit: 'K' | 'degC' | 'degF';
	/** Sections that the author has been through, by group id. */
	visited: string[];
}
