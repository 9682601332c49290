import type { AssumptionDraft, ClaimDraft, LimitDraft, QuestionKind } from '../../../calculation/draft';
import type { DossierInput } from '../../../schemas/dossier';

/*
 * What the demo's organisations work on. Clients, products, bodies and files are invented; values from publications
 * name them. Figures are computed when the demo is loaded, never written here.
 */

export interface DemoAssumption {
	value: string;
	unit?: string;
	/** Kind of spread with its parameters; exact where left out. */
	spread?: [AssumptionDraft['spread'], Record<string, string>];
	source: Partial<AssumptionDraft['source']> & { kind: AssumptionDraft['source']['kind'] };
	note?: string;
}

export interface DemoCalculation {
	title: string;
	kind: QuestionKind;
	method: string;
	assumptions: Record<string, DemoAssumption>;
	options?: Record<string, string>;
	claim?: Partial<ClaimDraft>;
	limit?: Partial<LimitDraft>;
	temperatureUnit?: 'K' | 'degC' | 'degF';
	/** Left as a form that somebody is still filling in. */
	unfinished?: boolean;
}

/** What happened to a report after it was written, in order. People are named by their address. */
export interface DemoReview {
	by: string;
	/** What the author asks to look at. */
	note: string;
	/** Remarks: on the report's own places ("text.answer"), or on an input of its first result ("input:bondAlbedo"). */
	remarks?: { on: string; body: string; answer?: string }[];
	/** The reviewer's own figure beside an output of the first result. */
	figure?: {
		output: string;
		kind: 'value' | 'upper-bound' | 'lower-bound';
		value: string;
		unit: string;
		giveOrTake: string;
		averages: string;
		route: string;
	};
	/** Left open, or how it was decided and with which words. */
	decision?: { kind: 'returned' | 'approved'; words: string };
}

/** A memo on calculations of its dossier, by their titles. */
export interface DemoReport {
	title: string;
	on: string[];
	background: string;
	commentary: string;
	leftOut: string;
	review?: DemoReview;
	issue?: boolean;
}

export interface DemoDossier {
	dossier: DossierInput;
	calculations: DemoCalculation[];
	reports?: DemoReport[];
}
