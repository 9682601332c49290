import { randomUUID } from 'node:crypto';
import { chooseMethod, newAssumption, numberInputs } from '$lib/calculation/new-draft';
import { methodById } from '$lib/methods';
import { createCalculation, deleteCalculation, saveDraft } from '$lib/server/calculations/change';
import { getCalculation } from '$lib/server/calculations/load';
import { startRun } from '$lib/server/calculations/runs';
import type { Database } from '$lib/server/db';
import { createDossier } from '$lib/server/dossiers/create';
import { deleteDossier } from '$lib/server/dossiers/delete';
import { deleteEvidence } from '$lib/server/evidence/delete';
import { uploadEvidence } from '$lib/server/evidence/upload';
import { createReport, deleteReport, saveReport } from '$lib/server/reports/change';
import { getReport } from '$lib/server/reports/load';
import { requestPreview } from '$lib/server/reports/preview';
import { addComment, settleComment } from '$lib/server/reviews/comments';
import { approveReport } from '$lib/server/reviews/decide';
import { enterFigure, type FigureInput } from '$lib/server/reviews/own-figure';
import { sendForReview } from '$lib/server/reviews/send';
import { reviewView } from '$lib/server/reviews/view';
import { pngChunk, smallPng } from '$lib/server/testing/files';
import type { House } from './people';

/** Everything that a dossier can hold, by the names that entries use; `mark` is a word that stands in all its texts. */
export async function makeDossier(
	db: Database,
	{ author, reviewer }: House,
	mark: string
): Promise<Record<string, string>> {
	const fields = {
		title: `Roof of ${mark}`,
		question: `How hot does the roof of ${mark} get?`,
		client: `${mark} Trust`,
		clientContact: `Keeper of ${mark}`,
		scope: `The sheet of ${mark} alone.`,
		reliance: `${mark} Trust`,
		projectNumber: '',
		orderNumber: ''
	};
	const dossier = await createDossier(author, fields, db);
	const deletedDossier = await createDossier(author, { ...fields, title: `Put away, ${mark}` }, db);
	await deleteDossier(author, deletedDossier, db);

	const emptyDossier = await createDossier(author, { ...fields, title: `Empty, ${mark}` }, db);

	const evidence = await upload(db, author, dossier, `${mark} one`);
	const deletedEvidence = await upload(db, author, dossier, `${mark} two`);
	await deleteEvidence(author, deletedEvidence, db);

	const calculation = await makeCalculation(db, author, dossier, mark);
	const run = await startRun(author, calculation, db);
	const deletedCalculation = await makeCalculation(db, author, dossier, mark);
	await deleteCalculation(author, deletedCalculation, db);

	const report = await makeReport(db, author, dossier, run, mark);
	const issued = await makeReport(db, author, dossier, run, mark);
	const deletedReport = await makeReport(db, author, dossier, run, mark);
	await deleteReport(author, deletedReport, db);
	const preview = await requestPreview(author, report, db);
	const inReview = await makeReport(db, author, dossier, run, mark);
	const { version } = await getReport(author, inReview, db);
	const sending = { reviewers: [reviewer.userId], note: `Look at ${mark}.`, baseVersion: version };
	await sendForReview(author, inReview, sending, db);
	const remark = { place: 'text.answer', body: `Is ${mark} meant?` };
	const comment = await addComment(reviewer, inReview, remark, db);
	const settled = { ...remark, body: `And of ${mark}?` };
	const settledComment = await addComment(reviewer, inReview, settled, db);
	await settleComment(author, settledComment, db);
	const figure = await enterFigure(reviewer, inReview, ownFigure(run), db);
	const approved = await makeReport(db, author, dossier, run, mark);
	await sendForReview(author, approved, sending, db);
	const { digest } = await reviewView(reviewer, approved, db);
	await approveReport(reviewer, approved, { statement: `Recomputed for ${mark}.`, digest }, db);
	return {
		inReview,
		approved,
		comment,
		settledComment,
		figure,
		reviewerPerson: reviewer.userId,
		dossier,
		deletedDossier,
		emptyDossier,
		evidence,
		deletedEvidence,
		calculation,
		deletedCalculation,
		run,
		report,
		issued,
		deletedReport,
		preview
	};
}

/** A figure by another route, as a reviewer enters it. */
export function ownFigure(runId: string): FigureInput {
	return {
		runId,
		output: 'solarReflectanceIndex',
		kind: 'value',
		value: '83',
		unit: '',
		giveOrTake: '2',
		averages: 'the sheet',
		route: 'by hand'
	};
}

type Author = House['author'];

async function upload(db: Database, author: Author, dossierId: string, name: string): Promise<string> {
	const { id } = await uploadEvidence(author, dossierId, { name: `${name}.png`, bytes: distinctPng() }, db);
	return id;
}

async function makeCalculation(
	db: Database,
	author: Author,
	dossierId: string,
	mark: string
): Promise<string> {
	const method = methodById('solar-reflectance-index');
	if (method === undefined) throw new Error('The method of the fixtures is gone.');
	const given = { title: `Sheet of ${mark}`, kind: 'test-limit' } as const;
	const id = await createCalculation(author, dossierId, given, db);
	const { draft: empty, version } = await getCalculation(author, id, db);
	const draft = chooseMethod(empty, method);
	const values: Record<string, [string, string]> = {
		solarReflectance: ['0.690', '0.012'],
		thermalEmittance: ['0.880', '0.010']
	};
	for (const input of numberInputs(method)) {
		const [value, standardUncertainty] = values[input.id] ?? [];
		if (value === undefined || standardUncertainty === undefined) continue;
		draft.assumptions[input.id] = {
			...newAssumption(input),
			value,
			spread: 'normal',
			spreadValues: { standardUncertainty },
			source: {
				kind: 'citation',
				text: `Data sheet of ${mark} (invented)`,
				evidenceId: null,
				valueKind: 'aged',
				spreadMeans: 'standard-uncertainty'
			}
		};
	}
	const limit = {
		value: '82',
		output: 'solarReflectanceIndex',
		sense: 'at-least',
		rule: 'simple-acceptance',
		source: `Specification of ${mark} (invented)`
	} as const;
	const filled = {
		...draft,
		limit: draft.limit && { ...draft.limit, ...limit },
		visited: method.groups.map((group) => group.id)
	};
	await saveDraft(author, id, { draft: filled, baseVersion: version }, db);
	return id;
}

async function makeReport(
	db: Database,
	author: Author,
	dossierId: string,
	runId: string,
	mark: string
): Promise<string> {
	const id = await createReport(author, dossierId, { template: 'client-memo', runId }, db);
	const { text, runIds, version } = await getReport(author, id, db);
	const written = {
		...text,
		background: `Asked by the trust of ${mark}.`,
		commentary: `Measure the sheet of ${mark}.`,
		leftOut: 'Soiling.'
	};
	const change = { title: `Memo on ${mark}`, text: written, runIds, baseVersion: version };
	await saveReport(author, id, change, db);
	return id;
}

/** A sound picture that no other call has made. */
export function distinctPng(): Buffer {
	return smallPng([pngChunk('tEXt', Buffer.from(`Comment\0${randomUUID()}`, 'latin1'))]);
}
