import { error, fail, redirect } from '@sveltejs/kit';
import { can } from '$lib/server/access/can';
import { deletedCalculationTitle } from '$lib/server/calculations/change';
import { deleteDossier } from '$lib/server/dossiers/delete';
import { showDossier } from '$lib/server/dossiers/show';
import { deletedEvidenceName, deleteEvidence, restoreEvidence } from '$lib/server/evidence/delete';
import { largestFile } from '$lib/server/evidence/limits';
import { uploadEvidence } from '$lib/server/evidence/upload';
import { orHttpError } from '$lib/server/http/errors';
import { orFormFault } from '$lib/server/http/forms';
import { idIn } from '$lib/server/http/ids';
import { deletedReportNumber } from '$lib/server/reports/change';
import { readersOf } from '$lib/server/reviews/waiting';
import { answerInBrief, methodTitle } from '$lib/wording/answer-in-brief';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params, url }) => {
	const { membership } = locals;
	const deletedFile = idIn(url.searchParams, 'deleted-file');
	const deletedCalculation = idIn(url.searchParams, 'deleted-calculation');
	const deletedReport = idIn(url.searchParams, 'deleted-report');
	const [page, fileName, calculationTitle, reportNumber] = await orHttpError(
		Promise.all([
			showDossier(membership, params.id),
			deletedFile === undefined ? undefined : deletedEvidenceName(membership, deletedFile),
			deletedCalculation === undefined ? undefined : deletedCalculationTitle(membership, deletedCalculation),
			deletedReport === undefined ? undefined : deletedReportNumber(membership, deletedReport)
		])
	);
	const { dossier, calculations, reports, evidence } = page;
	const readers = await orHttpError(
		readersOf(
			membership,
			reports.rows.map(({ id }) => id)
		)
	);
	return {
		dossier: {
			id: dossier.id,
			title: dossier.title,
			question: dossier.question,
			client: dossier.client,
			clientContact: dossier.clientContact,
			scope: dossier.scope,
			reliance: dossier.reliance,
			projectNumber: dossier.projectNumber,
			orderNumber: dossier.orderNumber,
			updatedAt: dossier.updatedAt
		},
		calculations: calculations.rows.map(({ outcome, method, ...row }) => ({
			...row,
			method: method === null ? null : methodTitle(method),
			answer: outcome && answerInBrief(outcome)
		})),
		calculationsInAll: calculations.total,
		reports: reports.rows.map(({ outcome, ...row }) => ({
			...row,
			answer: outcome && answerInBrief(outcome),
			readers: readers.get(row.id) ?? null
		})),
		reportsInAll: reports.total,
		evidence,
		deletedCalculation:
			deletedCalculation && calculationTitle ? { id: deletedCalculation, title: calculationTitle } : null,
		deletedReport: deletedReport && reportNumber ? { id: deletedReport, number: reportNumber } : null,
		deletedFile: deletedFile && fileName ? { id: deletedFile, fileName } : null,
		may: {
			edit: can(membership, 'dossier.write'),
			inviteGuests: can(membership, 'guests.manage'),
			calculate: can(membership, 'calculation.write'),
			report: can(membership, 'report.write'),
			upload: can(membership, 'evidence.write')
		}
	};
};

/** Room for the largest file and the form around it. */
const largestUpload = largestFile + 64 * 1024;
const tooLarge = 'The file is larger than 10 MB. Choose a smaller one.';

export const actions: Actions = {
	delete: async (event) => {
		const gone = await orFormFault(event, deleteDossier(event.locals.membership, event.params.id));
		if ('fault' in gone) return gone.fault;
		redirect(303, `/dossiers?deleted=${event.params.id}`);
	},

	upload: async (event) => {
		const { locals, params, request } = event;
		// Refused by its stated length, before a byte of it is read into memory.
		if (Number(request.headers.get('content-length') ?? Infinity) > largestUpload) {
			return fail(413, { errors: { file: tooLarge }, values: {} });
		}
		const file = (await request.formData()).get('file');
		if (!(file instanceof File))
			error(400, 'The form was sent without a file field. Open the dossier again.');
		const bytes = Buffer.from(await file.arrayBuffer());
		const work = uploadEvidence(locals.membership, params.id, { name: file.name, bytes });
		const added = await orFormFault(event, work);
		if ('fault' in added) return added.fault;
		redirect(303, `/dossiers/${params.id}#evidence`);
	},

	deleteFile: async (event) => {
		const id = idIn(await event.request.formData(), 'id');
		if (id === undefined) error(400, 'The form named no file. Open the dossier again.');
		const gone = await orFormFault(event, deleteEvidence(event.locals.membership, id));
		if ('fault' in gone) return gone.fault;
		redirect(303, `/dossiers/${gone.data}?deleted-file=${id}#evidence`);
	},

	restoreFile: async ({ locals, request }) => {
		const id = idIn(await request.formData(), 'id');
		if (id === undefined) error(400, 'The notice named nothing to bring back. Open the dossier again.');
		const dossierId = await orHttpError(restoreEvidence(locals.membership, id));
		redirect(303, `/dossiers/${dossierId}#evidence`);
	}
};
