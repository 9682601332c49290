import type { Recomputation } from '$lib/record';
import type { ReportState } from '../reports/load';

/* What the use cases of review hand to pages. */

/** Somebody in a review; `guest` is one who was invited to the dossier alone. `name` is kept where the account is gone. */
export interface ReviewPerson {
	id: string | null;
	name: string;
	guest: boolean;
}

export type RoundState = 'open' | 'returned' | 'approved' | 'recalled' | 'void';

/** One round of review. */
export interface RoundView {
	id: string;
	/** 1 for the first. */
	round: number;
	state: RoundState;
	sentBy: ReviewPerson | null;
	sentAt: Date;
	/** What the author asked to look at. */
	note: string;
	askedOf: ReviewPerson[];
	decidedBy: ReviewPerson | null;
	decidedAt: Date | null;
	/** Statement of an approval, reasons of a return. */
	statement: string;
	/** False for an approval by one who wrote the report. */
	independent: boolean;
	/** Plain words; null unless `void`. */
	voidReason: string | null;
}

/** `null`: never approved in this revision. */
export type ApprovalView =
	| { holds: true; round: number; by: ReviewPerson | null; at: Date | null; independent: boolean }
	| { holds: false; round: number; why: string };

/** Short state for the report's page. */
export interface ReviewState {
	state: ReportState;
	/** Newest first. */
	rounds: RoundView[];
	approval: ApprovalView | null;
	/** Remarks of the whole revision that are neither settled nor answered. */
	unanswered: number;
	/** True where the organisation issues nothing without a second reader. */
	secondReaderWanted: boolean;
	/** What the person at the page may do now. */
	maySend: boolean;
	mayRecall: boolean;
	mayReview: boolean;
	mayReopen: boolean;
}

/** Somebody who could be asked to review; where `able` is false, `why` says why not. */
export interface ReviewerChoice {
	id: string;
	name: string;
	email: string;
	guest: boolean;
	able: boolean;
	why: string | null;
}

/** A remark with its answers, oldest first; an answer has none of its own. */
export interface CommentView {
	id: string;
	place: string;
	/** Round during which it was written; 0 before the first. */
	round: number;
	/** The line as it read then. */
	quoted: string;
	/** True where that line reads otherwise now, or is gone. */
	lineChanged: boolean;
	body: string;
	writtenBy: ReviewPerson;
	writtenAt: Date;
	settledAt: Date | null;
	settledBy: ReviewPerson | null;
	answers: CommentView[];
}

/** One line that a reviewer looks at and can remark on. */
export interface ReviewLine {
	/** "text.answer", "run:ID/input:ID", "run:ID/output:ID", "report.title": see `reportLines`. */
	place: string;
	/** Heading that it stands under: the same words on consecutive lines of one section. */
	section: string;
	label: string;
	/** May hold several paragraphs; empty where nothing was written. */
	text: string;
	/** Where it came from, its spread and its note, for an assumption. */
	source: string | null;
	/** Differs from what was last looked at; `before` is empty for a line that is new. */
	changed: { before: string } | null;
	comments: CommentView[];
}

/** A reviewer's own figure. */
export interface FigureView {
	id: string;
	runId: string;
	runTitle: string;
	output: string;
	outputName: string;
	kind: 'value' | 'upper-bound' | 'lower-bound';
	/** "62 degC", with "give or take 3 K" where that was stated. */
	figure: string;
	/** As typed. */
	value: string;
	unit: string;
	giveOrTake: string;
	averages: string;
	route: string;
	by: ReviewPerson;
	enteredAt: Date;
	/** Not null: taken back, kept, no longer printed. */
	withdrawnAt: Date | null;
	/** What the report says of it beside the result. */
	sentence: string;
	/** Whether the person at the page entered it and may still take it back. */
	mayWithdraw: boolean;
}

/** A result that a figure can be entered beside. */
export interface FigureTarget {
	runId: string;
	runTitle: string;
	output: string;
	name: string;
	/** "63.4 degC". */
	estimate: string;
	/** What the result averages, in words. */
	averages: string;
	/** Units that can be offered; any that converts is taken. */
	units: string[];
}

/** Everything that the review page shows. */
export interface ReviewView {
	report: {
		id: string;
		number: string;
		revision: number;
		title: string;
		state: ReportState;
		version: number;
		dossierId: string;
		dossierTitle: string;
	};
	/** SHA-256 over all that an approval covers; send it back with the approval. */
	digest: string;
	lines: ReviewLine[];
	/** Lines that were there when it was last looked at and are gone, with their remarks. */
	gone: ReviewLine[];
	/** What `changed` compares with; null where nobody looked before. */
	comparedWith: { round: number; at: Date } | null;
	/** Newest first. */
	rounds: RoundView[];
	figures: FigureView[];
	figureTargets: FigureTarget[];
	/** Unmet duties, in words. */
	duties: string[];
	/** Remarks of the present round that are neither settled nor answered: said before a decision, no bar to it. */
	unanswered: number;
	/** When the person at the page last had these results computed again, and what came of it; null where never. */
	recomputed: { at: Date; same: boolean; figures: number } | null;
	mayDecide: boolean;
	/** Why not, in plain words; null where `mayDecide`. */
	whyNot: string | null;
	/** True where approving would be approving one's own work: the report then says so. */
	ownWork: boolean;
	mayComment: boolean;
	mayEnterFigure: boolean;
}

/** Records computed again, side by side with what the report states. */
export interface RecomputationView {
	/** False where too many trials were asked for, or a record cannot be computed: `problem` says so. */
	done: boolean;
	/** True where every figure came out as stored. */
	same: boolean;
	/** Numbers compared. */
	figures: number;
	runs: {
		runId: string;
		title: string;
		figures: number;
		same: boolean;
		differences: Recomputation['differences'];
		problem: string | null;
	}[];
	problem: string | null;
}
