/** How the uncertainty was worked out, in sentences (JCGM 100:2008, 7.2; JCGM 101:2008, 5.5 and 7). */
import type { ComputeRequest, ComputeResult, DistributionSpec, OutputResult } from '../calculation/types';
import type { Method } from '../methods/types';
import { attachUnit, formatNumber, formatSignificant } from '../quantities';
import { inputName, type WordingOptions } from './answer';
import { britishEnglish, type Catalogue } from './catalogue';
import { joinPhrases, listed, type Phrase } from './phrase';
import { percent } from './present';

/** True where nothing in the result carries an uncertainty. */
function allExact(result: ComputeResult): boolean {
	return Object.values(result.outputs).every((output) => !((output.standardUncertainty ?? 0) > 0));
}

/** Interval half-width over the standard uncertainty, for a first-order result. */
function coverageFactor(output: OutputResult): number | undefined {
	const { interval, standardUncertainty } = output;
	if (!interval || !standardUncertainty) return undefined;
	return (interval.high - interval.low) / (2 * standardUncertainty);
}

function intervalNote(result: ComputeResult, leading: string, words: Catalogue): string | undefined {
	const output = result.outputs[leading];
	const coverage = percent(result.evaluation.coverage ?? 0.95);
	if (result.evaluation.propagation === 'monte-carlo') {
		return result.evaluation.interval === 'shortest'
			? words.uncertainty.shortest(coverage)
			: words.uncertainty.symmetric(coverage);
	}
	const factor = output ? coverageFactor(output) : undefined;
	if (factor === undefined) return undefined;
	const freedom = output?.effectiveDegreesOfFreedom;
	return words.uncertainty.coverageFactor(
		coverage,
		formatNumber(factor, 2),
		freedom === undefined ? undefined : formatSignificant(freedom, 3)
	);
}

/** Notes on the uncertainty of a result, one paragraph each. */
export function uncertaintyNotes(
	method: Pick<Method, 'inputs'>,
	request: ComputeRequest,
	result: ComputeResult,
	leading: string,
	options: Pick<WordingOptions, 'catalogue'> = {}
): Phrase[] {
	const words = options.catalogue ?? britishEnglish;
	const { evaluation } = result;
	if (evaluation.propagation === 'none') return [words.uncertainty.none()];
	if (allExact(result)) return [words.uncertainty.exact()];
	const first: Phrase[] = [
		evaluation.propagation === 'monte-carlo'
			? words.uncertainty.monteCarlo(formatNumber(evaluation.trials ?? 0, 0), evaluation.seed ?? '')
			: words.uncertainty.firstOrder()
	];
	const interval = intervalNote(result, leading, words);
	if (interval) first.push([interval]);
	if (evaluation.redrawn) first.push([words.uncertainty.redrawn(formatNumber(evaluation.redrawn, 0))]);
	if (evaluation.converged === false) first.push([words.uncertainty.notConverged]);
	return [
		joinPhrases(first),
		joinPhrases([[correlationNote(method, request, words)], words.sharesAreOfVariance()]),
		words.uncertainty.rounding()
	];
}

function correlationNote(method: Pick<Method, 'inputs'>, request: ComputeRequest, words: Catalogue): string {
	const pairs = (request.correlations ?? []).filter((pair) => pair.coefficient !== 0);
	if (pairs.length === 0) return words.uncertainty.independent;
	return words.uncertainty.correlated(
		listed(
			pairs.map(
				(pair) =>
					`${inputName(method, pair.a)} with ${inputName(method, pair.b)}, ${formatSignificant(pair.coefficient, 3)}`
			),
			words.and
		)
	);
}

/** A distribution in words: "rectangular, half-width 0.01". Parameters stand in `unit`, differences in `differenceUnit`. */
export function distributionText(
	spec: DistributionSpec,
	unit: string,
	unitOfDifference: string,
	options: Pick<WordingOptions, 'catalogue'> = {}
): string {
	const words = options.catalogue ?? britishEnglish;
	const value = (n: number) => attachUnit(formatSignificant(n, 10), unit);
	const difference = (n: number) => attachUnit(formatSignificant(n, 10), unitOfDifference);
	const plain = (n: number) => formatSignificant(n, 6);
	const parts = [words.distribution[spec.type]];
	if ('halfWidth' in spec) parts.push(words.halfWidth(difference(spec.halfWidth)));
	if ('low' in spec && 'high' in spec) parts.push(words.between(value(spec.low), value(spec.high)));
	if ('mode' in spec) parts.push(words.mode(value(spec.mode)));
	if (spec.type === 'lognormal') parts.push(words.geometric(plain(spec.geometricStandardDeviation)));
	if (spec.type === 'trapezoidal') parts.push(words.shape(plain(spec.beta)));
	if (spec.type === 'curvilinear-trapezoid') parts.push(words.shape(difference(spec.inexactness)));
	if (spec.type === 'beta') parts.push(words.shape(`${plain(spec.alpha)}, ${plain(spec.beta)}`));
	if (spec.type === 'discrete') parts.push(words.oneOf(listed(spec.values.map(value), words.and)));
	if (spec.degreesOfFreedom !== undefined) parts.push(words.degreesOfFreedom(plain(spec.degreesOfFreedom)));
	return parts.join(', ');
}
