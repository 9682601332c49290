/**
 * What a report owes its reader before it may be issued. Each unmet duty is said in plain words, with the key of the
 * place where it is put right.
 */
import type { ReportModel, RunModel } from './model';

export interface Duty {
	/** Stable name of the duty. */
	code: string;
	message: string;
	/**
	 * Where it is put right: `dossier.client`, `report.title`, `text.question`, `organisation.address`, `runs`,
	 * `run:<run id>`, `run:<run id>/claim`, `run:<run id>/limit`, `run:<run id>/input:<input id>`.
	 */
	place: string;
}

const blank = (text: string | null | undefined): boolean => !text || text.trim() === '';

/** Words that say two numbers agree, unless they are denied in the same clause. */
function saysAgreement(text: string): boolean {
	return text.split(/[.;:!?\n]/).some((clause) => {
		const agrees =
			/\b(agree[sd]?|agreement|consistent with|confirm(s|ed)?|match(es|ed)?|bears? out|correct)\b/i;
		const denied = /\b(not|no|nor|neither|cannot|never|without|disagree\w*|inconsistent)\b|n[’']t\b/i;
		return agrees.test(clause) && !denied.test(clause);
	});
}

function runDuties(model: ReportModel, run: RunModel): Duty[] {
	const duties: Duty[] = [];
	const place = `run:${run.id}`;
	for (const row of run.assumptions) {
		const given = row.provenance !== 'default' && row.symbol !== '';
		const reasonMissing =
			row.provenance === 'judgement' &&
			!row.source.some((part) => typeof part === 'string' && part.includes(': '));
		if (given && (row.provenance === 'not-stated' || reasonMissing)) {
			duties.push({
				code: 'source-missing',
				message: reasonMissing
					? `“${row.name}” is the author’s judgement: say what it rests on.`
					: `Say where the value of “${row.name}” comes from.`,
				place: `${place}/input:${row.id}`
			});
		}
	}
	const { finding, result } = run;
	if (result.evaluation.converged === false) {
		duties.push({
			code: 'not-converged',
			message: `“${run.title}” was computed with too few trials for this coverage: compute it again with more.`,
			place
		});
	}
	if (finding?.kind === 'claim' && blank(finding.citation)) {
		duties.push({
			code: 'claim-source-missing',
			message: 'Say where the claim was made: publication, date and page.',
			place: `${place}/claim`
		});
	}
	if (finding?.kind === 'limit' && result.finding?.kind === 'limit' && blank(result.finding.limit.source)) {
		duties.push({
			code: 'limit-source-missing',
			message: 'Say where the limit comes from: specification, contract or standard, with its clause.',
			place: `${place}/limit`
		});
	}
	const stopped =
		finding?.verdict === 'not-comparable' || run.cautions.some((caution) => caution.level === 'stop');
	if (stopped && [model.text.answer, model.text.commentary].some(saysAgreement)) {
		duties.push({
			code: 'agreement-claimed',
			message:
				'The text says that two numbers agree, while the comparison was stopped because they average different things. Change the answer or the commentary.',
			place: saysAgreement(model.text.answer) ? 'text.answer' : 'text.commentary'
		});
	}
	return duties;
}

/** Duties that are unmet, in the order in which a reader would miss them; empty where the report may be issued. */
export function unmetDuties(model: ReportModel): Duty[] {
	const duties: Duty[] = [];
	const need = (missing: boolean, code: string, message: string, place: string): void => {
		if (missing) duties.push({ code, message, place });
	};
	need(blank(model.title), 'title-missing', 'Give the report a title.', 'report.title');
	need(
		!model.withoutAddressee && blank(model.addressee?.name),
		'addressee-missing',
		'Name the client the report is for, or say that there is none.',
		'dossier.client'
	);
	need(
		blank(model.text.question),
		'question-missing',
		'Write the question that the report answers.',
		'text.question'
	);
	need(
		blank(model.organisation.name),
		'organisation-missing',
		'Give the organisation a name.',
		'organisation.name'
	);
	need(
		model.organisation.address.every(blank),
		'address-missing',
		'Give the organisation’s postal address.',
		'organisation.address'
	);
	need(blank(model.author.name), 'author-missing', 'The author needs a name.', 'account.name');
	need(
		model.runs.length === 0,
		'result-missing',
		'Choose at least one computed result for the report.',
		'runs'
	);
	need(
		model.revision > 1 &&
			model.history.some((entry) => entry.revision === model.revision && blank(entry.reason)),
		'reason-missing',
		'State why this revision replaces the one before.',
		'report.reason'
	);
	return [...duties, ...model.runs.flatMap((run) => runDuties(model, run))];
}
