/**
 * A reviewer's own figure beside a result. What is said of the two is computed and careful: numbers that average
 * different things are not compared, and nothing here says that two numbers agree.
 */
import type { OutputResult } from '../calculation/types';
import type { OutputSpec } from '../methods/types';
import { attachUnit, convert, convertDifference } from '../quantities';
import { parseNumber } from '../quantities/parse-number';
import { britishEnglish, percent, presentDifference, type TemperatureScale } from '../wording';
import { typedNumber, unitOfDifference } from './assumptions';
import type { ReviewerFigureRow } from './model';
import type { PersonSource, ReviewerFigureSource } from './source';

/** What an output averages, and which temperature it is: the words that make a reviewer's figure comparable with it. */
export function averagesOf(spec: Pick<OutputSpec, 'area' | 'period' | 'temperatureKind'>): string {
	const { areas, periods, temperatureKinds } = britishEnglish;
	const kind = spec.temperatureKind;
	return [
		`${areas[spec.area]}, ${periods[spec.period]}`,
		...(kind && kind !== 'not-stated' ? [temperatureKinds[kind]] : [])
	].join('; ');
}

const plain = (text: string): string =>
	text
		.toLowerCase()
		.replace(/[\s.,;]+/g, ' ')
		.trim();

/** Whether two descriptions of an average are the same words; an unstated one is never the same. */
export function sameAverage(a: string, b: string): boolean {
	return plain(a) !== '' && plain(a) === plain(b) && !plain(a).includes('not stated');
}

/** "Ada Tallis, reviewer". */
export function personText(who: PersonSource): string {
	return who.role ? `${who.name}, ${who.role}` : who.name;
}

type Typed = Pick<ReviewerFigureSource, 'kind' | 'value' | 'unit' | 'giveOrTake'>;

/** The figure as it is printed. */
export function figureText({ kind, value, unit, giveOrTake }: Typed): string {
	const number = (text: string): string => {
		const parsed = parseNumber(text);
		return typedNumber(text, parsed.ok ? parsed.value : Number.NaN);
	};
	const stated = attachUnit(number(value), unit);
	const around =
		giveOrTake.trim() === ''
			? ''
			: `, give or take ${attachUnit(number(giveOrTake), unitOfDifference(unit))}`;
	const head = { value: '', 'upper-bound': 'not above ', 'lower-bound': 'not below ' }[kind];
	return `${head}${stated}${around}`;
}

interface Numbers {
	/** In the output's unit. */
	value: number;
	giveOrTake: number;
}

/** @returns undefined where a text is no number or the unit does not convert to the output's. */
export function figureNumbers(
	figure: Typed,
	spec: Pick<OutputSpec, 'quantity'>,
	unit: string
): Numbers | undefined {
	const value = parseNumber(figure.value);
	const around =
		figure.giveOrTake.trim() === '' ? { ok: true as const, value: 0 } : parseNumber(figure.giveOrTake);
	if (!value.ok || !around.ok) return undefined;
	try {
		const difference = spec.quantity === 'temperature-difference';
		return {
			value: difference
				? convertDifference(value.value, figure.unit, unit)
				: convert(value.value, figure.unit, unit),
			giveOrTake: convertDifference(around.value, unitOfDifference(figure.unit), unitOfDifference(unit))
		};
	} catch (error) {
		if (error instanceof RangeError) return undefined;
		throw error;
	}
}

/** Where every input is exact the interval has no width, and says nothing. */
const intervalOf = ({ interval }: OutputResult) =>
	interval && interval.high > interval.low ? interval : null;

function valueSentence(numbers: Numbers, output: OutputResult, scale: TemperatureScale): string {
	const by = numbers.value - (output.mean ?? output.value);
	const distance = presentDifference(Math.abs(by), output.unit, output.standardUncertainty, scale).value;
	const where = /[1-9]/.test(distance)
		? `The reviewer’s figure lies ${distance} ${by > 0 ? 'above' : 'below'} the result.`
		: 'At the digits printed, the reviewer’s figure does not differ from the result.';
	const found = intervalOf(output);
	if (found === null) return `${where} No interval of the result was worked out to hold it against.`;
	const { low, high, coverage } = found;
	const interval = `the result’s ${percent(coverage)} coverage interval`;
	if (numbers.giveOrTake > 0) {
		const meets = numbers.value + numbers.giveOrTake >= low && numbers.value - numbers.giveOrTake <= high;
		return `${where} Its range ${meets ? 'overlaps' : 'does not overlap'} with ${interval}.`;
	}
	const within = numbers.value >= low && numbers.value <= high;
	return `${where} It is ${within ? 'within' : 'outside'} ${interval}.`;
}

function boundSentence(kind: 'upper-bound' | 'lower-bound', bound: number, output: OutputResult): string {
	const upper = kind === 'upper-bound';
	const name = `the reviewer’s ${upper ? 'upper' : 'lower'} bound`;
	const keeps = (number: number): boolean => (upper ? number <= bound : number >= bound);
	const side = upper ? 'below' : 'above';
	if (!keeps(output.mean ?? output.value)) return `The result does not lie ${side} ${name}.`;
	const interval = intervalOf(output);
	if (interval === null) return `The result lies ${side} ${name}.`;
	return keeps(upper ? interval.high : interval.low)
		? `The result lies ${side} ${name}, with its whole ${percent(interval.coverage)} coverage interval.`
		: `The result lies ${side} ${name}; its ${percent(interval.coverage)} coverage interval reaches past it.`;
}

/**
 * What the report says of a reviewer's figure beside an output.
 * @param output the run's result; its own unit is what the figure is converted to
 */
export function comparisonSentence(
	figure: ReviewerFigureSource,
	spec: OutputSpec,
	output: OutputResult,
	scale: TemperatureScale
): string {
	const numbers = figureNumbers(figure, spec, output.unit);
	if (numbers === undefined) return 'Its unit does not convert to that of the result; not compared.';
	const stated = figure.averages.trim();
	const own = averagesOf(spec);
	const same = sameAverage(stated, own);
	if (figure.kind === 'value' && same) return valueSentence(numbers, output, scale);
	if (figure.kind === 'value') {
		return stated === ''
			? 'What the figure averages is not stated: it is not compared with the result.'
			: `The result averages “${own}”, the figure something described otherwise: the two are not compared.`;
	}
	const bound = boundSentence(figure.kind, numbers.value, output);
	if (same) return bound;
	return `${bound} The result averages “${own}”: this tells something of it only as far as the bound holds for that too.`;
}

/** One printed row. */
export function reviewerFigureRow(
	figure: ReviewerFigureSource,
	spec: OutputSpec,
	output: OutputResult,
	scale: TemperatureScale
): ReviewerFigureRow {
	return {
		output: spec.id,
		quantity: spec.name,
		figure: figureText(figure),
		averages: figure.averages.trim() === '' ? 'not stated' : figure.averages.trim(),
		route: figure.route.trim(),
		by: personText(figure.by),
		comparison: comparisonSentence(figure, spec, output, scale)
	};
}
