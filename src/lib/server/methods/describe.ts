import { methods } from '$lib/methods';
import type { Citation, InputSpec, Method, NumberInput, Range } from '$lib/methods/types';
import { attachUnit, displayUnit, formatSignificant } from '$lib/quantities';
import { britishEnglish } from '$lib/wording';
import { texToMathml } from '../equations/mathml';

/** A method's page, made from the method's own data; plain JSON. */
export interface MethodPage {
	id: string;
	version: string;
	title: string;
	answers: string;
	averages: string;
	leavesOut: readonly string[];
	equations: { id: string; title: string; mathml: string; spoken: string; citation: number | null }[];
	inputs: SymbolRow[];
	outputs: { id: string; mathml: string; name: string; unit: string; averages: string }[];
	options: { id: string; name: string; question: string; choices: string[] }[];
	citations: { number: number; text: string; href: string | null }[];
	history: Method['history'];
}

export interface SymbolRow {
	id: string;
	/** MathML of the symbol; null for an input that no equation names. */
	mathml: string | null;
	name: string;
	unit: string;
	/** "0 to 1", "above 0", "any"; null where the input is no number. */
	range: string | null;
	/** Range that the source vouches for, where it is narrower. */
	validity: string | null;
	/** "1361 W m⁻²", with the number of its citation or words for its source. */
	default: { value: string; source: string | number } | null;
	optional: boolean;
}

/** A range in words: "0 to 1", "above 0", "at least 5", "any". An end that is left out by the range says so. */
export function rangeInWords({ low, high, lowOpen, highOpen }: Range, unit: string): string {
	const text = (value: number) => attachUnit(formatSignificant(value, 6), unit);
	if (low === null && high === null) return 'any';
	if (high === null) return `${lowOpen ? 'above' : 'at least'} ${text(low ?? 0)}`;
	if (low === null) return `${highOpen ? 'below' : 'at most'} ${text(high)}`;
	const ends = `${formatSignificant(low, 6)} to ${text(high)}`;
	if (lowOpen && highOpen) return `${ends}, both ends left out`;
	if (lowOpen) return `${ends}, without ${formatSignificant(low, 6)}`;
	return highOpen ? `${ends}, without ${formatSignificant(high, 6)}` : ends;
}

function defaultOf(input: NumberInput, numberOf: (id: string) => number | null): SymbolRow['default'] {
	if (input.default === undefined) return null;
	const { value, source } = input.default;
	const number = typeof value === 'number' ? value : Number(value);
	return {
		value: Number.isFinite(number) ? attachUnit(formatSignificant(number, 6), input.unit) : String(value),
		source: numberOf(source) ?? source
	};
}

function inputRow(input: InputSpec, numberOf: (id: string) => number | null): SymbolRow {
	if (input.kind !== 'number') {
		return {
			id: input.id,
			mathml: null,
			name: input.name,
			unit: '',
			range: null,
			validity: null,
			default: null,
			optional: false
		};
	}
	return {
		id: input.id,
		mathml: texToMathml(input.symbol, false),
		name: input.name,
		unit: displayUnit(input.unit),
		range: rangeInWords(input.domain, input.unit),
		validity: input.validity ? rangeInWords(input.validity, input.unit) : null,
		default: defaultOf(input, numberOf),
		optional: input.optional === true
	};
}

/** Where a citation can be read: its DOI, else its own address. */
function hrefOf({ doi, url }: Citation): string | null {
	return doi === undefined ? (url ?? null) : `https://doi.org/${doi}`;
}

export function describeMethod(method: Method): MethodPage {
	const numbers = new Map(method.citations.map(({ id }, i) => [id, i + 1]));
	const numberOf = (id: string) => numbers.get(id) ?? null;
	return {
		id: method.id,
		version: method.version,
		title: method.title,
		answers: method.answers,
		averages: method.averages,
		leavesOut: method.leavesOut,
		equations: method.equations.map(({ id, title, tex, spoken, citation }) => ({
			id,
			title,
			mathml: texToMathml(tex, true),
			spoken,
			citation: numberOf(citation)
		})),
		inputs: method.inputs.map((input) => inputRow(input, numberOf)),
		outputs: method.outputs.map(({ id, symbol, name, unit, area }) => ({
			id,
			mathml: texToMathml(symbol, false),
			name,
			unit: displayUnit(unit),
			averages: britishEnglish.areas[area]
		})),
		options: method.options.map(({ id, name, question, choices, range }) => ({
			id,
			name,
			question,
			choices: choices?.map(({ label }) => label) ?? (range ? [rangeInWords(range, '')] : [])
		})),
		citations: method.citations.map((citation, i) => ({
			number: i + 1,
			text: citation.text,
			href: hrefOf(citation)
		})),
		history: method.history
	};
}

export interface MethodLine {
	id: string;
	title: string;
	version: string;
	answers: string;
	averages: string;
}

/** Every method in a line or two, in the order in which they are offered. */
export function methodLines(): MethodLine[] {
	return methods.map(({ id, title, version, answers, averages }) => ({
		id,
		title,
		version,
		answers,
		averages
	}));
}
