/** A result as sentences: what it is, how well it is known, what it averages, and what drives its uncertainty. */
import type { ComputeResult } from '../calculation/types';
import type { Method, OutputSpec } from '../methods/types';
import { britishEnglish, type Catalogue } from './catalogue';
import { capitalise, plainText, type Phrase } from './phrase';
import { presentOutput, share, type PresentedOutput } from './present';
import type { TemperatureScale } from './temperature';

/** Of a method the wording needs only what its outputs and inputs are called. */
export type NamedMethod = Pick<Method, 'outputs' | 'inputs' | 'averages'>;

export interface WordingOptions {
	scale: TemperatureScale;
	catalogue?: Catalogue;
}

export interface WordedOutput {
	spec: OutputSpec;
	presented: PresentedOutput;
}

/** The specification of an output; throws where the method gives no such output. */
export function outputSpec(method: NamedMethod, id: string): OutputSpec {
	const spec = method.outputs.find((output) => output.id === id);
	if (!spec) throw new Error(`The method gives no output named “${id}”.`);
	return spec;
}

/** Outputs of a result in the method's order, primary ones first, each as it is printed. */
export function wordedOutputs(
	method: NamedMethod,
	result: Pick<ComputeResult, 'outputs'>,
	scale: TemperatureScale
): WordedOutput[] {
	const given = method.outputs.filter((spec) => result.outputs[spec.id] !== undefined);
	const ordered = [...given.filter((spec) => spec.primary), ...given.filter((spec) => !spec.primary)];
	return ordered.flatMap((spec) => {
		const output = result.outputs[spec.id];
		return output ? [{ spec, presented: presentOutput(output, spec, scale) }] : [];
	});
}

/** The output that a result leads with: the one that a finding is about, else the method's primary one. */
export function leadingOutput(method: NamedMethod, result: ComputeResult): string | undefined {
	if (result.finding) return result.finding.output;
	const given = method.outputs.filter((spec) => result.outputs[spec.id] !== undefined);
	return (given.find((spec) => spec.primary) ?? given[0])?.id;
}

/** "The mean temperature of the sunlit side is −24.2 °C, with a 95 % coverage interval from … to …." */
export function answerSentence(
	method: NamedMethod,
	result: ComputeResult,
	outputId: string,
	options: WordingOptions
): Phrase {
	const words = options.catalogue ?? britishEnglish;
	const spec = outputSpec(method, outputId);
	const output = result.outputs[outputId];
	if (!output) throw new Error(`The result holds no output named “${outputId}”.`);
	const presented = presentOutput(output, spec, options.scale);
	const head = words.answer(spec.name, presented.estimate);
	if (presented.low !== undefined && presented.high !== undefined && presented.coverage !== undefined) {
		return [...head, words.answerInterval(presented.low, presented.high, presented.coverage)];
	}
	if (presented.uncertainty !== undefined) return [...head, words.answerSpread(presented.uncertainty)];
	return [
		...head,
		result.evaluation.propagation === 'none' ? words.answerWithoutUncertainty : words.answerExact
	];
}

/** "95 % interval −25.8 °C to −22.6 °C", for a line below the answer; undefined where there is none. */
export function intervalLine(presented: PresentedOutput, options: WordingOptions): string | undefined {
	const words = options.catalogue ?? britishEnglish;
	const { low, high, coverage } = presented;
	return low && high && coverage ? words.intervalLine(coverage, low, high) : undefined;
}

/** What is averaged, over which time, and which temperature is meant. */
export function averagesSentence(spec: OutputSpec, options: WordingOptions): string {
	const words = options.catalogue ?? britishEnglish;
	const sentences = [words.averagesOver(spec.area, spec.period)];
	if (spec.temperatureKind && spec.temperatureKind !== 'not-stated') {
		sentences.push(words.kindOfTemperature(spec.temperatureKind));
	}
	return sentences.join(' ');
}

export interface Driver {
	input: string;
	name: string;
	share: number;
	/** "72 %". */
	text: string;
}

/** Name of an input or of a table's quantity by its column id. */
export function inputName(method: Pick<Method, 'inputs'>, id: string): string {
	const [first = id, row, column] = id.split('.');
	const spec = method.inputs.find((input) => input.id === first);
	if (!spec) return row === undefined ? id : id;
	if (row === undefined) return spec.name;
	const columnName = 'columns' in spec ? spec.columns.find((c) => c.id === column)?.name : undefined;
	return columnName ? `${columnName} of ${row}` : `${spec.name}, ${row}`;
}

/** Inputs by their share of an output's variance, largest first; those that carry none are left out. */
export function drivers(method: NamedMethod, result: ComputeResult, outputId: string): Driver[] {
	const sensitivity = result.outputs[outputId]?.sensitivity ?? {};
	return Object.entries(sensitivity)
		.filter(([, entry]) => entry.share > 0)
		.map(([input, entry]) => ({
			input,
			name: inputName(method, input),
			share: entry.share,
			text: share(entry.share)
		}))
		.sort((a, b) => b.share - a.share || a.input.localeCompare(b.input, 'en'));
}

/** "The Bond albedo causes 72 % of the uncertainty, the emissivity 27 %, every other input less." */
export function driversSentence(
	method: NamedMethod,
	result: ComputeResult,
	outputId: string,
	options: WordingOptions
): string {
	const words = options.catalogue ?? britishEnglish;
	const all = drivers(method, result, outputId);
	const [first, ...rest] = all;
	if (!first) return words.driversNone;
	const named = rest.filter((driver) => driver.share >= 0.05).slice(0, 3);
	const parts = [
		words.driver(first.name, first.text),
		...named.map((driver) => words.driverFollowing(driver.name, driver.text))
	];
	if (rest.length > named.length) parts.push(words.driversRest);
	return `${capitalise(parts.join(', '))}.`;
}

/** The answer as words alone, as an author's text starts from it. */
export function answerText(
	method: NamedMethod,
	result: ComputeResult,
	outputId: string,
	options: WordingOptions
): string {
	return plainText(answerSentence(method, result, outputId, options));
}
