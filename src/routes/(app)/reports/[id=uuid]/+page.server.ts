import { redirect } from '@sveltejs/kit';
import { can } from '$lib/server/access/can';
import { orHttpError } from '$lib/server/http/errors';
import { orFormFault, typedValues } from '$lib/server/http/forms';
import { deleteReport, restoreReport, saveReport } from '$lib/server/reports/change';
import { dutiesOf, issueOf } from '$lib/server/reports/issue';
import { getReport, runChoices } from '$lib/server/reports/load';
import { requestPreview } from '$lib/server/reports/preview';
import { placeLink } from '$lib/server/reports/places';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params }) => {
	const report = await orHttpError(getReport(locals.membership, params.id));
	const open = report.state === 'draft' || report.state === 'returned';
	const runs = await orHttpError(runChoices(locals.membership, report.dossier.id, report.runIds));
	const duties = open ? await orHttpError(dutiesOf(locals.membership, report)) : [];
	const { id, title, client, clientContact } = report.dossier;
	return {
		report: { ...report, dossier: { id, title, client, clientContact } },
		open,
		runs,
		duties: duties.map((duty) => ({ message: duty.message, href: placeLink(duty.place, report, runs) })),
		issue: await orHttpError(issueOf(locals.membership, report)),
		mayWrite: can(locals.membership, 'report.write'),
		mayIssue: can(locals.membership, 'report.issue')
	};
};

function changeFrom(form: FormData): unknown {
	const field = (name: string) => String(form.get(name) ?? '').replace(/\r\n/g, '\n');
	return {
		title: field('title'),
		text: {
			question: field('question'),
			background: field('background'),
			answer: field('answer'),
			commentary: field('commentary'),
			leftOut: field('leftOut'),
			commissionedBy: field('commissionedBy'),
			withoutAddressee: form.get('withoutAddressee') === 'yes'
		},
		runIds: form.getAll('runIds').map(String),
		baseVersion: Number(form.get('version'))
	};
}

export const actions: Actions = {
	save: async (event) => {
		const { locals, params, request } = event;
		const form = await request.formData();
		const values = typedValues(form);
		const outcome = await orFormFault(
			event,
			saveReport(locals.membership, params.id, changeFrom(form)),
			values
		);
		if ('fault' in outcome) return outcome.fault;
		const next = form.get('next');
		if (next === 'issue') redirect(303, `/reports/${params.id}/issue`);
		if (next !== 'preview') return { saved: true, version: outcome.data };
		const preview = await orFormFault(event, requestPreview(locals.membership, params.id), values);
		if ('fault' in preview) return preview.fault;
		redirect(303, `/reports/${params.id}/previews/${preview.data}`);
	},
	delete: async ({ locals, params }) => {
		const { dossierId } = await orHttpError(deleteReport(locals.membership, params.id));
		redirect(303, `/dossiers/${dossierId}?deleted-report=${params.id}#reports`);
	},
	undo: async ({ locals, params }) => {
		await orHttpError(restoreReport(locals.membership, params.id));
		redirect(303, `/reports/${params.id}`);
	}
};
