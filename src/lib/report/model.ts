/**
 * A report as it is printed: plain JSON, worded and rounded, frozen when an issue is asked for. Whatever is printed
 * in an order stands in an array, so that the model may be kept where the order of keys is lost.
 */
import type { CautionLevel, ComputeRequest, ComputeResult, Finding, Series } from '../calculation/types';
import type { Citation } from '../methods/types';
import type { Phrase } from '../wording/phrase';
import type {
	EvidenceSource,
	OrganisationSource,
	PersonSource,
	ReportState,
	ReviewSource,
	RevisionSource,
	VerificationSource
} from './source';
import type { ReportText } from './text';

export const reportModelFormat = 'noonmark-report-model/1';

/** Where a number came from, in the order of how far a reader can check it. */
export type Provenance = 'citation' | 'file' | 'default' | 'judgement' | 'not-stated';

export interface OutputRow {
	id: string;
	name: string;
	label: string;
	/** TeX. */
	symbol: string;
	/** "the sunlit hemisphere, at one instant". */
	average: string;
	estimate: string;
	uncertainty: string | null;
	interval: string | null;
}

export interface AssumptionRow {
	id: string;
	name: string;
	/** TeX; empty for a row of a table input. */
	symbol: string;
	/** As typed, with its unit. */
	value: string;
	/** The same in the method's own unit, where another was typed. */
	inOwnUnit: string | null;
	/** Standard uncertainty with its unit; null for exact. */
	uncertainty: string | null;
	distribution: string;
	provenance: Provenance;
	source: Phrase;
	note: string;
	/** Share of the variance of the leading output; null where none was worked out. */
	share: string | null;
	shareValue: number;
}

export interface EquationRow {
	id: string;
	title: string;
	tex: string;
	/** The same with the numbers and units put in. */
	put: string | null;
	/** Written for the ear. */
	spoken: string;
	citation: string;
}

export interface FigureRow {
	id: string;
	title: string;
	/** The caption's first sentence. */
	finding: string;
	/** Common name of what the curves show; null where one curve names itself. */
	yName: string | null;
	/** Units and temperatures as printed. */
	series: Series;
	stated: { value: number; label: string } | null;
	assumed: { value: number; label: string } | null;
}

export interface CautionRow {
	code: string;
	level: CautionLevel;
	/** Bold first words. */
	lead: string;
	text: string;
	/** Where the rule comes from, in words, and the id under which the report cites it. */
	source: string | null;
	cite: string | null;
}

export interface FindingRow {
	kind: Finding['kind'];
	verdict: Finding['verdict'];
	heading: string;
	reasons: Phrase;
	/** A claim's own words and where they stand. */
	quotation: string;
	citation: string;
}

/** A reviewer's figure by another route, and what may be said of it beside the result. */
export interface ReviewerFigureRow {
	output: string;
	/** Name of that output. */
	quantity: string;
	/** "62 °C, give or take 3 K", "not above 70 °C". */
	figure: string;
	averages: string;
	route: string;
	by: string;
	/** Computed: never says that two numbers agree. */
	comparison: string;
}

export interface RunModel {
	id: string;
	title: string;
	method: { id: string; version: string; title: string; averages: string; leavesOut: string[] };
	/** The output that the report leads with, as a sentence, and what it averages. */
	leading: string;
	headline: Phrase;
	averages: string;
	/** Said where the mean of the trials and the best estimates print differently. */
	aside: string | null;
	finding: FindingRow | null;
	outputs: OutputRow[];
	/** "95 %"; null where no interval was worked out. */
	coverage: string | null;
	/** Absent in reports that were frozen before reviewers could enter figures, and where nobody entered one. */
	reviewerFigures?: ReviewerFigureRow[];
	assumptions: AssumptionRow[];
	/** Defaults of the method that were replaced, and options other than the usual ones, one sentence each. */
	deviations: string[];
	equations: EquationRow[];
	figures: FigureRow[];
	drivers: string;
	cautions: CautionRow[];
	notes: Phrase[];
	computedAt: string;
	engineVersion: string;
	nodeVersion: string;
	record: string;
	request: ComputeRequest;
	result: ComputeResult;
}

export interface ReportModel {
	format: typeof reportModelFormat;
	template: string;
	language: 'en-GB';
	organisation: OrganisationSource;
	number: string;
	revision: number;
	state: ReportState;
	title: string;
	/** Null with `withoutAddressee` false means that nobody has said whom it is for. */
	addressee: { name: string; contact: string } | null;
	withoutAddressee: boolean;
	author: PersonSource;
	authoriser: PersonSource | null;
	dates: { inputData: string | null; calculation: string | null; issue: string | null };
	verification: VerificationSource | null;
	text: ReportText;
	/** The answer as computed, for a report whose author has written none. */
	composedAnswer: string;
	scope: string;
	reliance: string;
	projectNumber: string;
	orderNumber: string;
	runs: RunModel[];
	evidence: EvidenceSource[];
	review: ReviewSource;
	history: RevisionSource[];
	/** Everything that may be cited; numbers are given in order of citation when the document is laid out. */
	references: Citation[];
}
