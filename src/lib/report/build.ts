/** Builds the model of a report from what the caller has loaded: everything worded, rounded and in order. */
import type { Citation, Method } from '../methods/types';
import {
	answerSentence,
	averagesSentence,
	britishEnglish,
	cautionLead,
	driversSentence,
	findingSentences,
	intervalLine,
	leadingOutput,
	outputSpec,
	outputsOf,
	percent,
	plainText,
	uncertaintyNotes,
	wordedOutputs,
	wordingCitations,
	type NamedMethod,
	type TemperatureScale
} from '../wording';
import { assumptionRows, deviations, SourceList } from './assumptions';
import { equationRows } from './equations';
import { figureRows } from './figures';
import { reportModelFormat, type FindingRow, type ReportModel, type RunModel } from './model';
import { reviewerFigureRow } from './reviewer-figure';
import type { ReportSource, RunSource } from './source';

export interface BuildContext {
	/** The method of a result; undefined where this version of the service does not know it. */
	methodOf(id: string): Method | undefined;
}

/** Characters that a document cannot hold: control characters other than line ends and tabs. */
function clean(text: string): string {
	return [...text.replace(/\r\n?/g, '\n')]
		.filter((character) => {
			const code = character.codePointAt(0) ?? 0;
			return code >= 32 ? code !== 127 : character === '\n' || character === '\t';
		})
		.join('')
		.normalize('NFC');
}

/** Every string of a plain value cleaned; numbers and the rest stay as they are. */
function cleanAll<T>(value: T): T {
	if (typeof value === 'string') return clean(value) as T;
	if (Array.isArray(value)) return value.map((item: unknown) => cleanAll(item)) as T;
	if (value && typeof value === 'object') {
		return Object.fromEntries(Object.entries(value).map(([key, item]) => [key, cleanAll(item)])) as T;
	}
	return value;
}

function findingRow(method: NamedMethod, run: RunSource, scale: TemperatureScale): FindingRow | null {
	const { finding } = run.result;
	if (!finding) return null;
	const worded = findingSentences(method, finding, { scale });
	return {
		kind: finding.kind,
		verdict: finding.verdict,
		...worded,
		quotation: finding.kind === 'claim' ? (run.draft.claim?.quotation.trim() ?? '') : '',
		citation: finding.kind === 'claim' ? (run.draft.claim?.citation.trim() ?? '') : ''
	};
}

/** The id of a work that the method cites, or that of the words as a reference of their own. */
function citationOf(method: Method, source: string, sources: SourceList): string {
	const known = [...method.citations, ...wordingCitations].find(
		({ id, text }) => id === source || text === source
	);
	return known?.id ?? sources.add(source);
}

/**
 * One run, worded and rounded; the result page shows it as the report prints it.
 * @param sources collects what its assumptions cite
 * @throws Error where the run gave no output.
 */
export function buildRun(
	source: Pick<ReportSource, 'temperatureUnit' | 'evidence' | 'reviewerFigures'>,
	run: RunSource,
	method: Method,
	sources: SourceList
): RunModel {
	const scale = source.temperatureUnit ?? run.draft.temperatureUnit;
	const { result } = run;
	const named: NamedMethod = { ...method, outputs: outputsOf(method, result) };
	const leading = leadingOutput(named, result);
	if (leading === undefined) throw new Error(`The calculation “${run.title}” has no result to report.`);
	const worded = wordedOutputs(named, result, scale);
	const lead = worded.find((output) => output.spec.id === leading);
	const spec = outputSpec(named, leading);
	const reviewerFigures = (source.reviewerFigures ?? []).flatMap((figure) => {
		const output = result.outputs[figure.output];
		if (figure.runId !== run.id || !output) return [];
		return [reviewerFigureRow(figure, outputSpec(named, figure.output), output, scale)];
	});
	return {
		id: run.id,
		title: run.title,
		method: {
			id: result.method.id,
			version: result.method.version,
			title: method.title,
			averages: method.averages,
			leavesOut: [...method.leavesOut]
		},
		leading,
		headline: answerSentence(named, result, leading, { scale }),
		averages: averagesSentence(spec, { scale }),
		aside: lead?.presented.atBestEstimates
			? britishEnglish.atBestEstimates(lead.presented.atBestEstimates)
			: null,
		finding: findingRow(named, run, scale),
		outputs: worded.map(({ spec: output, presented }) => ({
			id: output.id,
			name: output.name,
			label: output.label,
			symbol: output.symbol,
			average: `${britishEnglish.areas[output.area]}, ${britishEnglish.periods[output.period]}`,
			estimate: presented.estimate,
			uncertainty: presented.uncertainty ?? null,
			interval: presented.low && presented.high ? `${presented.low} to ${presented.high}` : null
		})),
		coverage:
			lead && intervalLine(lead.presented, { scale }) ? percent(result.evaluation.coverage ?? 0.95) : null,
		...(reviewerFigures.length > 0 ? { reviewerFigures } : {}),
		assumptions: assumptionRows({ method, run, evidence: source.evidence, sources, leading }),
		deviations: deviations(method, run),
		equations: equationRows(method, result),
		figures: figureRows(method, named.outputs, result, scale),
		drivers: driversSentence(named, result, leading, { scale }),
		cautions: result.cautions.map((caution) => ({
			code: caution.code,
			level: caution.level,
			lead: cautionLead(caution),
			text: caution.text,
			source: caution.source ?? null,
			cite: caution.source ? citationOf(method, caution.source, sources) : null
		})),
		notes: uncertaintyNotes(method, run.request, result, leading),
		computedAt: run.computedAt,
		engineVersion: run.engineVersion,
		nodeVersion: run.nodeVersion,
		record: result.record,
		request: run.request,
		result
	};
}

/** The answer in words alone: the verdicts where there are findings, and each leading result. */
export function composeAnswer(runs: readonly RunModel[]): string {
	return runs
		.map((run) => [run.finding?.heading, plainText(run.headline)].filter(Boolean).join(' '))
		.join('\n');
}

function latest(instants: readonly string[]): string | null {
	return instants.reduce<string | null>(
		(newest, instant) => (newest === null || Date.parse(instant) > Date.parse(newest) ? instant : newest),
		null
	);
}

/**
 * The model of a report.
 * @throws Error where a run's method is unknown or gave no output.
 */
export function buildReportModel(given: ReportSource, context: BuildContext): ReportModel {
	const sources = new SourceList();
	const source = { ...given, ...cleanAll({ ...given, runs: undefined }), runs: given.runs };
	const methods: Method[] = [];
	const runs = source.runs.map((run) => {
		const method = context.methodOf(run.result.method.id);
		if (!method) throw new Error(`The method “${run.result.method.id}” is not known here.`);
		methods.push(method);
		return buildRun(source, { ...run, title: clean(run.title), draft: cleanAll(run.draft) }, method, sources);
	});
	const references = new Map<string, Citation>();
	for (const citation of [
		...methods.flatMap((method) => method.citations),
		...wordingCitations,
		...sources.references
	]) {
		references.set(citation.id, citation);
	}
	return {
		format: reportModelFormat,
		template: source.template,
		language: source.language,
		organisation: source.organisation,
		number: source.report.number,
		revision: source.report.revision,
		state: source.report.state,
		title: source.report.title,
		addressee: source.addressee === 'none' ? null : source.addressee,
		withoutAddressee: source.addressee === 'none',
		author: source.author,
		authoriser: source.authoriser,
		dates: {
			inputData: source.dates.inputData,
			calculation: latest(runs.map((run) => run.computedAt)),
			issue: source.dates.issue
		},
		verification: source.verification,
		text: source.report.text,
		composedAnswer: composeAnswer(runs),
		scope: source.scope,
		reliance: source.reliance,
		projectNumber: source.projectNumber,
		orderNumber: source.orderNumber,
		runs,
		evidence: source.evidence,
		review: source.review,
		history: source.history,
		references: [...references.values()]
	};
}
