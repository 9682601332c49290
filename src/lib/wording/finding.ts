/** A finding as sentences: the verdict as a heading, the reasons as a paragraph with the numbers. */
import type { ClaimFinding, Finding, LimitFinding } from '../calculation/types';
import { attachUnit, convert, formatNumber, formatSignificant } from '../quantities';
import { outputSpec, type NamedMethod, type WordingOptions } from './answer';
import { britishEnglish, type Catalogue } from './catalogue';
import { joinPhrases, type Phrase } from './phrase';
import {
	percent,
	presentDifference,
	presentOutput,
	presentStated,
	printedDecimals,
	probability
} from './present';
import {
	differenceUnit,
	isTemperatureUnit,
	temperatureDifferenceOn,
	temperatureOn,
	type TemperatureScale
} from './temperature';

export interface WordedFinding {
	/** The verdict as a sentence. */
	heading: string;
	/** One paragraph. */
	reasons: Phrase;
}

/** A limit or an acceptance limit on the reader's scale, to `decimals` places or in full. */
function level(value: number, unit: string, scale: TemperatureScale, decimals?: number): string {
	const temperature = isTemperatureUnit(unit);
	const own = temperature ? temperatureOn(scale, value, unit) : value;
	const text = decimals === undefined ? formatSignificant(own, 6) : formatNumber(own, decimals);
	return attachUnit(text, temperature ? scale : unit);
}

function claim(
	finding: ClaimFinding,
	method: NamedMethod,
	scale: TemperatureScale,
	words: Catalogue
): WordedFinding {
	const spec = outputSpec(method, finding.output);
	const { stated, result } = finding;
	const statedText = presentStated(stated.value, stated.unit || result.unit);
	const computed = presentOutput(
		{ value: result.value, unit: result.unit, standardUncertainty: result.standardUncertainty },
		spec,
		scale
	);
	const difference = convertStated(stated.value, stated.unit || result.unit, result.unit) - result.value;
	const size = presentDifference(Math.abs(difference), result.unit, finding.differenceUncertainty, scale);
	const phrases: Phrase[] = [
		words.claim.statedAndComputed(statedText, spec.name, computed.estimate, computed.uncertainty)
	];
	if (/[1-9]/.test(size.value)) {
		phrases.push([words.claim.difference(size.value, difference > 0, size.uncertainty)]);
	} else {
		phrases.push([words.claim.noDifference]);
	}
	if (finding.verdict === 'not-comparable') {
		phrases.push([words.claim.differenceNoAgreement]);
	} else if (finding.normalisedError !== undefined) {
		phrases.push(words.claim.score('E_n', formatNumber(finding.normalisedError, 2)));
	} else if (finding.zetaScore !== undefined) {
		phrases.push(words.claim.score('zeta', formatNumber(finding.zetaScore, 2)));
	}
	phrases.push(...remarks(finding).map((reason): Phrase => [reason]));
	return { heading: words.claim[finding.verdict](statedText, spec.name), reasons: joinPhrases(phrases) };
}

/**
 * What the engine says beyond the figures, which are told above: a stop's own text stands among the cautions, and the
 * difference has been written on the reader's scale.
 */
function remarks(finding: ClaimFinding): string[] {
	return finding.verdict === 'not-comparable' ? [] : finding.reasons.slice(1);
}

function convertStated(value: number, from: string, to: string): number {
	return from === to ? value : convert(value, from, to);
}

function limit(
	finding: LimitFinding,
	method: NamedMethod,
	scale: TemperatureScale,
	words: Catalogue
): WordedFinding {
	const spec = outputSpec(method, finding.output);
	const { result } = finding;
	const unit = finding.limit.unit || result.unit;
	const limitText = `${words.limit.sense[finding.limit.sense]} ${presentStated(finding.limit.value, unit)}`;
	const computed = presentOutput(
		{ value: result.value, unit: result.unit, standardUncertainty: result.standardUncertainty },
		spec,
		scale
	);
	const phrases: Phrase[] = [
		words.limit.probability(
			computed.estimate,
			words.limit.sense[finding.limit.sense],
			presentStated(finding.limit.value, unit),
			probability(finding.probabilityOfConformity)
		)
	];
	if (finding.limit.source) phrases.push([words.limit.source(finding.limit.source.replace(/\.$/, ''))]);
	phrases.push([rule(finding, scale, words)], [riskSentence(finding, words)]);
	return { heading: words.limit[finding.verdict](spec.name, limitText), reasons: joinPhrases(phrases) };
}

function rule(finding: LimitFinding, scale: TemperatureScale, words: Catalogue): string {
	if (finding.rule.type === 'simple-acceptance') return words.limit.simpleAcceptance;
	const { unit, standardUncertainty } = finding.result;
	const temperature = isTemperatureUnit(unit);
	const onScale = (value: number) => (temperature ? temperatureDifferenceOn(scale, value, unit) : value);
	const decimals = printedDecimals(onScale(standardUncertainty));
	const band = onScale(finding.guardBand);
	const bandText = attachUnit(
		decimals === undefined ? formatSignificant(band, 3) : formatNumber(band, decimals),
		temperature ? differenceUnit(scale) : unit
	);
	const acceptance = `${words.limit.sense[finding.limit.sense]} ${level(finding.acceptanceLimit, unit, scale, decimals)}`;
	return words.limit.guardBand(percent(finding.rule.risk), bandText, acceptance);
}

function riskSentence(finding: LimitFinding, words: Catalogue): string {
	const risk = probability(finding.risk.probability);
	if (finding.verdict === 'undecided') {
		const { limit, result, probabilityOfConformity } = finding;
		const meetsLimit = limit.sense === 'at-most' ? result.value <= limit.value : result.value >= limit.value;
		return words.limit.undecidedRisk(
			meetsLimit,
			probability(1 - probabilityOfConformity),
			probability(probabilityOfConformity)
		);
	}
	return finding.risk.kind === 'consumer' ? words.limit.consumerRisk(risk) : words.limit.producerRisk(risk);
}

/** The verdict and its reasons. */
export function findingSentences(
	method: NamedMethod,
	finding: Finding,
	options: WordingOptions
): WordedFinding {
	const words = options.catalogue ?? britishEnglish;
	return finding.kind === 'claim'
		? claim(finding, method, options.scale, words)
		: limit(finding, method, options.scale, words);
}
