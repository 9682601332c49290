/**
 * What a report is built from: plain data that the caller has loaded. Nothing here depends on the database, so
 * that a report can as well be built from a file or in a test. Instants are ISO 8601 with their offset.
 */
import type { CalculationDraft } from '../calculation/draft';
import type { ComputeRequest, ComputeResult } from '../calculation/types';
import type { ReportText } from './text';

export type ReportState =
	'draft' | 'in-review' | 'returned' | 'approved' | 'issued' | 'superseded' | 'withdrawn';

/** The scale in which temperatures are printed. Differences and uncertainties follow it (K, or degF for degF). */
export type TemperatureUnit = 'K' | 'degC' | 'degF';

export interface OrganisationSource {
	name: string;
	/** Lines of the postal address. */
	address: string[];
	registrationLine: string | null;
	/** How a reader reports an error: a mail address or a web address. */
	contact?: string | null;
}

export interface PersonSource {
	name: string;
	/** What they are in the organisation, such as "senior consultant". */
	role?: string;
}

/** `none` says outright that there is no addressee; null means that nobody has said anything yet. */
export type AddresseeSource = { name: string; contact: string } | 'none' | null;

export interface RunSource {
	id: string;
	/** The calculation's title. */
	title: string;
	/** The draft that the request was made from: sources, notes and evidence belong to the run. */
	draft: CalculationDraft;
	request: ComputeRequest;
	result: ComputeResult;
	/** Version of the computing code and of Node.js that ran it. */
	engineVersion: string;
	nodeVersion: string;
	/** When the run finished. */
	computedAt: string;
}

export interface EvidenceSource {
	id: string;
	fileName: string;
	mediaType: string;
	size: number;
	/** Hex digits. */
	sha256: string;
}

/** `approved-by-author`: by one who wrote it, where the organisation's rules allow that; it counts as no review. */
export type ReviewSource =
	| { kind: 'not-reviewed' }
	| { kind: 'reviewed' | 'approved-by-author'; by: PersonSource; at: string; remarks?: string };

/** What a reviewer found by a route of their own, as typed. */
export interface ReviewerFigureSource {
	runId: string;
	/** Output of the run's method that it stands beside. */
	output: string;
	/** A bound is one that the result must not pass. */
	kind: 'value' | 'upper-bound' | 'lower-bound';
	value: string;
	unit: string;
	/** Half the width of a range around a value, in the unit of a difference; empty where none was stated. */
	giveOrTake: string;
	/** What it averages, in words; empty where that was not stated. */
	averages: string;
	/** By which route. */
	route: string;
	by: PersonSource;
}

/** One line of the change history; `reason` is empty for a first issue. */
export interface RevisionSource {
	revision: number;
	issuedAt: string | null;
	reason: string;
	/** What was changed, one sentence each. */
	changes?: string[];
}

/** How a reader checks the file; left out of a preview. */
export interface VerificationSource {
	/** Where the page stands, such as "https://noonmark.example/verify". */
	address: string;
	/** Short code, such as "8KQ2-7MTR". */
	code: string;
	/** SHA-256 of the service's root certificate, hex digits. */
	rootFingerprint: string;
}

export interface ReportSource {
	template: string;
	language: 'en-GB';
	organisation: OrganisationSource;
	report: { number: string; revision: number; state: ReportState; title: string; text: ReportText };
	addressee: AddresseeSource;
	/** Agreed scope, who may rely on the report, project and order numbers; empty text where there is none. */
	scope: string;
	reliance: string;
	projectNumber: string;
	orderNumber: string;
	author: PersonSource;
	/** Who authorised the issue; null until then. */
	authoriser: PersonSource | null;
	/** When the assumptions were last changed, and when the report was issued. Each run has its own date. */
	dates: { inputData: string | null; issue: string | null };
	verification: VerificationSource | null;
	runs: RunSource[];
	/** Every file that an assumption of these runs names. */
	evidence: EvidenceSource[];
	review: ReviewSource;
	/** Reviewers' own figures beside the results, oldest first; those of other runs are left out. */
	reviewerFigures?: ReviewerFigureSource[];
	/** Earlier and present revisions, oldest first. */
	history: RevisionSource[];
	/** For the whole report; each calculation's own choice where it is left out. */
	temperatureUnit?: TemperatureUnit;
}
