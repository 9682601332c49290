/**
 * The interface every method meets. A method is data (what it asks, gives, cites and warns of) plus one `prepare`
 * that turns a checked setting into an evaluation over columns of trials. Nothing outside a method's folder knows
 * which method it is dealing with.
 */
import type {
	Area,
	Caution,
	Options,
	OutputResult,
	Period,
	Series,
	TemperatureKind
} from '../calculation/types';

/** What an input or output measures; decides which units it takes and how it is written. */
export type QuantityKind =
	| 'ratio'
	| 'temperature'
	| 'temperature-difference'
	| 'irradiance'
	| 'power'
	| 'length'
	| 'time'
	| 'angle'
	| 'area'
	| 'pressure'
	| 'speed'
	| 'mass-ratio'
	| 'heat-transfer-coefficient'
	| 'daily-irradiation'
	| 'rate-of-evaporation'
	| 'number'
	| 'other';

export interface Citation {
	id: string;
	/** Authors, year, title, publication, page or table: enough to find it. */
	text: string;
	doi?: string;
	url?: string;
}

/** A closed or open end of a range; `null` is unbounded. In the input's own unit. */
export interface Range {
	low: number | null;
	high: number | null;
	lowOpen?: boolean;
	highOpen?: boolean;
}

export interface DefaultValue {
	value: number | string;
	/** Where the default comes from: a citation id of the method, or words. */
	source: string;
}

export interface NumberInput {
	kind: 'number';
	id: string;
	/** TeX symbol, such as `S` or `T_\mathrm{n}`. */
	symbol: string;
	/** The trade's term, lower case: "Bond albedo". */
	name: string;
	/** The plain question of the form: "What share of it is reflected to space?" */
	question: string;
	/** One or two sentences of help that end with the trade term. */
	help: string;
	quantity: QuantityKind;
	/** The input's own unit, in the syntax of the contract; '' for a pure number. */
	unit: string;
	/** Units that the form offers, own unit first. */
	units: readonly string[];
	/** Method default; without one the input must be given unless `optional`. */
	default?: DefaultValue;
	optional?: boolean;
	/** Physical domain: outside it is an error, and a trial outside it is drawn again. */
	domain: Range;
	/** Range in which the method's source vouches for it: outside it is the caution `outside-validity`. */
	validity?: Range & { source: string };
	/** Section of the form. */
	group: string;
}

export interface DateTimeInput {
	kind: 'date-time';
	id: string;
	name: string;
	question: string;
	help: string;
	group: string;
}

export interface TableColumn {
	id: string;
	name: string;
	type: 'name' | 'number' | 'text' | 'choice' | 'names';
	quantity?: QuantityKind;
	unit?: string;
	choices?: readonly string[];
	domain?: Range;
	optional?: boolean;
}

export interface TableInput {
	kind: 'table' | 'object';
	id: string;
	name: string;
	question: string;
	help: string;
	columns: readonly TableColumn[];
	minRows: number;
	group: string;
}

export type InputSpec = NumberInput | DateTimeInput | TableInput;

/** Of several ways to give the same thing exactly one may be used; the first is the default way. */
export interface AlternativeInputs {
	id: string;
	ways: readonly (readonly string[])[];
}

export interface OptionSpec {
	id: string;
	name: string;
	question: string;
	help?: string;
	default: string | number;
	/** For a closed choice. Inputs named in `needs` belong to that choice alone. */
	choices?: readonly { value: string; label: string; source?: string; needs?: readonly string[] }[];
	/** For a number option. */
	range?: Range & { integer?: boolean };
	group: string;
}

export interface OutputSpec {
	id: string;
	symbol: string;
	/** The trade's term, lower case. */
	name: string;
	/** How a sentence and the running answer call it: "Mean over the sunlit side". */
	label: string;
	quantity: QuantityKind;
	unit: string;
	area: Area;
	period: Period;
	temperatureKind?: TemperatureKind;
	/** True for the one or two that answer the question most directly; shown first. */
	primary?: boolean;
	/** Inputs without which this output is not determined. */
	needs?: readonly string[];
}

/** Best estimates and results by id, written for an equation with numbers put in. */
export interface EquationNumbers {
	/** The number with its unit as TeX, rounded for reading, e.g. `1361\,\mathrm{W\,m^{-2}}`. */
	input(id: string): string;
	output(id: string): string;
	/** The bare best estimate in the own unit, for a branch on it. */
	value(id: string): number | undefined;
}

export interface Equation {
	id: string;
	title: string;
	tex: string;
	/** The same with numbers and units put in; undefined where its inputs are missing. */
	put(numbers: EquationNumbers): string | undefined;
	/** Written for the ear. */
	spoken: string;
	citation: string;
	outputs: readonly string[];
}

export interface FigureSpec {
	/** Key into the result's `series`. */
	series: string;
	title: string;
	/** The caption's first sentence: the finding, from the computed curves. */
	finding(
		series: Series,
		outputs: Record<string, OutputResult>,
		/** A temperature in kelvin on the scale that the reader wants, one decimal, with its unit. */
		temperature?: (kelvin: number) => string
	): string;
	xScale?: 'linear' | 'log';
}

/** A checked setting at the best estimates, in SI, as a method sees it when it is prepared. */
export interface Setting {
	/** Best estimates by column id (input id, or `table.<row>.<column>`), SI. */
	values: Readonly<Record<string, number>>;
	/** Words and lists of table inputs, and date-times, as given. */
	tables: Readonly<Record<string, readonly Readonly<Record<string, unknown>>[]>>;
	texts: Readonly<Record<string, string>>;
	options: Readonly<Options>;
	given(id: string): boolean;
	has(id: string): boolean;
}

export type Columns = Readonly<Record<string, Float64Array>>;

/** A family of curves over one axis, evaluated over columns of trials so that a coverage band can be drawn. */
export interface CurveFamily {
	x: Series['x'];
	curves: readonly Omit<Series['curves'][number], 'values' | 'low' | 'high'>[];
	/** False where one evaluation is too dear to repeat for a band. */
	banded: boolean;
	/** Fills the first `n` entries of each curve's column at abscissa `index`, in the curve's own unit. */
	evaluate(index: number, inputs: Columns, n: number, out: Record<string, Float64Array>): void;
}

/** One prepared question. `evaluate` fills the first `n` entries of each output column from SI input columns. */
export interface PreparedMethod {
	/** Input columns that `evaluate` reads; all present, exact ones filled with their value. */
	columns: readonly string[];
	/** Outputs that this setting determines, in the order of presentation. */
	outputs: readonly OutputSpec[];
	/** Output columns are in SI. */
	evaluate(inputs: Columns, n: number, out: Record<string, Float64Array>): void;
	/** Curves by key of the result's `series`. */
	series: Readonly<Record<string, CurveFamily>>;
}

/** What a method may look at when it raises its own cautions. */
export interface CautionContext {
	setting: Setting;
	/** Standard uncertainty of an input column in SI; 0 for exact. */
	inputUncertainty(id: string): number;
	outputs: Readonly<Record<string, OutputResult>>;
}

export interface Method {
	id: string;
	version: string;
	title: string;
	/** One sentence: what it answers. */
	answers: string;
	/** One sentence: which average it gives, and which it does not. */
	averages: string;
	/** What it leaves out, one sentence each. */
	leavesOut: readonly string[];
	groups: readonly { id: string; title: string }[];
	inputs: readonly InputSpec[];
	alternatives: readonly AlternativeInputs[];
	options: readonly OptionSpec[];
	/** Every output the method can give; `prepare` says which it does for a setting. */
	outputs: readonly OutputSpec[];
	equations: readonly Equation[];
	citations: readonly Citation[];
	figures: readonly FigureSpec[];
	prepare(setting: Setting): PreparedMethod;
	cautions(context: CautionContext): Caution[];
	/** Version history, newest first. */
	history: readonly { version: string; date: string; change: string }[];
}
