import type { Citation } from '$lib/methods/types';
import { dayText } from '$lib/report/dates';
import type { CautionRow, ReportModel, RunModel } from '$lib/report/model';
import type { Phrase } from '$lib/wording';
import { documentWords as words } from '../../../../report-templates/shared/wording';
import type { ResultEquation } from '../calculations/result-view';
import { texToMathml } from '../equations/mathml';
import { drawRow, type DrawnFigure } from '../figures/of-row';
import { named, reviewStatement } from './review';

/** One calculation as a reader sees it: words, tables and a drawing, without the request and the trials. */
export interface ReadingRun extends Omit<RunModel, 'request' | 'result' | 'figures' | 'equations'> {
	equations: ResultEquation[];
	/** The one figure that shows the answer, as in the memo. */
	figure: DrawnFigure | null;
}

/** A report as its reading page shows it; everything comes from what was frozen when it was issued. */
export interface Reading {
	number: string;
	revision: number;
	title: string;
	organisation: { name: string; address: string[]; registrationLine: string | null; contact: string | null };
	/** "To the Trust, attn. S. Perrin", or that there is none. */
	addressee: string;
	/** "commissioned or funded by …", project and order numbers. */
	facts: string[];
	issuedOn: string | null;
	dates: { name: string; day: string }[];
	question: string;
	background: string;
	/** The author's own words; empty where the composed answer stands. */
	answer: string;
	runs: ReadingRun[];
	/** What qualifies the answer, each once, stops first. */
	cautions: CautionRow[];
	leftOut: { items: string[]; byAuthor: string; notes: CautionRow[] };
	deviations: string[];
	scope: string;
	reliance: string;
	opinion: { mark: string; text: string } | null;
	review: { statement: string; people: string; signature: string };
	history: { revision: number; issued: string; reason: string; changes: string[] }[];
	notices: string[];
	/** Short code of the verification page. */
	code: string | null;
	rootFingerprint: string | null;
	/** Works in the order in which the page cites them. */
	references: Citation[];
}

const unique = <T>(items: readonly T[]): T[] => [...new Set(items)];

/** Each once, in the order in which they are met. */
function onceEach(rows: readonly CautionRow[]): CautionRow[] {
	return rows.filter(
		(row, at) => rows.findIndex(({ code, text }) => code === row.code && text === row.text) === at
	);
}

const citedIn = (phrase: Phrase): string[] =>
	phrase.flatMap((part) => (typeof part === 'object' && 'cite' in part ? [part.cite] : []));

function citedWorks(model: ReportModel, cautions: readonly CautionRow[]): Citation[] {
	const ids = [
		...model.runs.flatMap((run) => [...citedIn(run.finding?.reasons ?? []), ...citedIn(run.headline)]),
		...cautions.flatMap(({ cite }) => cite ?? []),
		...model.runs.flatMap((run) => [
			...run.notes.flatMap(citedIn),
			...run.assumptions.flatMap(({ source }) => citedIn(source)),
			...run.equations.map(({ citation }) => citation)
		])
	];
	return unique(ids).flatMap((id) => model.references.find((reference) => reference.id === id) ?? []);
}

async function readingRun({
	request: _request,
	result: _result,
	figures,
	equations,
	...rest
}: RunModel): Promise<ReadingRun> {
	const [figure] = figures;
	return {
		...rest,
		equations: equations.map(({ id, title, tex, put, citation }) => ({
			id,
			title,
			mathml: texToMathml(tex, true),
			putMathml: put === null ? null : texToMathml(put, true),
			citation
		})),
		figure: figure === undefined ? null : await drawRow(figure)
	};
}

function facts({ text, projectNumber, orderNumber }: ReportModel): string[] {
	return [
		text.commissionedBy.trim() && words.commissionedBy(text.commissionedBy.trim()),
		projectNumber.trim() && words.project(projectNumber.trim()),
		orderNumber.trim() && words.order(orderNumber.trim())
	].filter((fact) => fact !== '');
}

function datesOf({ dates }: ReportModel): Reading['dates'] {
	const rows: [string, string | null][] = [
		[words.datesInput, dates.inputData],
		[words.datesCalculation, dates.calculation],
		[words.datesIssue, dates.issue]
	];
	return rows.map(([name, at]) => ({ name, day: at === null ? words.dateUnknown : dayText(at) }));
}

/** The report's reading page, in the report's own words wherever it has them. */
export async function readingOf(model: ReportModel): Promise<Reading> {
	const all = onceEach(model.runs.flatMap((run) => run.cautions));
	const grave = all.filter(({ level }) => level !== 'note');
	const cautions = [...grave].sort((a, b) => Number(b.level === 'stop') - Number(a.level === 'stop'));
	const written = model.text.answer.trim();
	const contact = model.organisation.contact?.trim() || null;
	const commentary = model.text.commentary.trim();
	const runs: ReadingRun[] = [];
	// One after the other: drawings wait for each other anyway.
	for (const run of model.runs) runs.push(await readingRun(run));
	const { addressee } = model;
	return {
		number: model.number,
		revision: model.revision,
		title: model.title,
		organisation: {
			name: model.organisation.name,
			address: model.organisation.address,
			registrationLine: model.organisation.registrationLine,
			contact
		},
		addressee: addressee === null ? words.noAddressee : words.to(addressee.name, addressee.contact),
		facts: facts(model),
		issuedOn: model.dates.issue === null ? null : dayText(model.dates.issue),
		dates: datesOf(model),
		question: model.text.question,
		background: model.text.background.trim(),
		answer: written === model.composedAnswer.trim() ? '' : written,
		runs,
		cautions,
		leftOut: {
			items: unique(model.runs.flatMap((run) => run.method.leavesOut)),
			byAuthor: model.text.leftOut.trim(),
			notes: all.filter(({ level }) => level === 'note')
		},
		deviations: unique(model.runs.flatMap((run) => run.deviations)),
		scope: model.scope.trim() || words.noScope,
		reliance: model.reliance.trim() || (addressee ? words.relianceAddressee : words.relianceNobody),
		opinion: commentary === '' ? null : { mark: words.opinionMark(model.author.name), text: commentary },
		review: {
			statement: reviewStatement(model),
			people: [
				words.written(named(model.author)),
				...(model.authoriser === null ? [] : [words.authorised(named(model.authoriser))])
			].join(' '),
			signature: words.signatureMeaning
		},
		history: model.history.map(({ revision, issuedAt, reason, changes }) => ({
			revision,
			issued: issuedAt === null ? words.notIssued : dayText(issuedAt),
			reason: reason || (revision === 1 ? words.firstIssue : ''),
			changes: changes ?? []
		})),
		notices: [
			words.noticeSeal,
			words.noticeAdvice,
			words.inFull,
			contact === null ? words.noticeErrorsPlain : words.noticeErrors(contact)
		],
		code: model.verification?.code ?? null,
		rootFingerprint: model.verification?.rootFingerprint ?? null,
		references: citedWorks(model, all)
	};
}
