import { fail, redirect } from '@sveltejs/kit';
import { answerField, answersIn } from '$lib/components/report/answers';
import { can } from '$lib/server/access/can';
import { orHttpError } from '$lib/server/http/errors';
import { orFormFault, textOf, typedValues } from '$lib/server/http/forms';
import { match as isUuid } from '../../../../params/uuid';
import { deleteReport, restoreReport, saveReport } from '$lib/server/reports/change';
import { dutiesOf, issueOf } from '$lib/server/reports/issue';
import { getReport, runChoices } from '$lib/server/reports/load';
import { placeLink, placeName } from '$lib/server/reports/places';
import { requestPreview } from '$lib/server/reports/preview';
import { answerComment, listComments } from '$lib/server/reviews/comments';
import { reopenReport } from '$lib/server/reviews/reopen';
import { recallReview } from '$lib/server/reviews/send';
import { reviewOf } from '$lib/server/reviews/state';
import type { Actions, PageServerLoad, RequestEvent } from './$types';

export const load: PageServerLoad = async ({ locals, params }) => {
	const { membership } = locals;
	const report = await orHttpError(getReport(membership, params.id));
	const open = report.state === 'draft' || report.state === 'returned';
	const runs = await orHttpError(runChoices(membership, report.dossier.id, report.runIds));
	const duties = open ? await orHttpError(dutiesOf(membership, report)) : [];
	const issue = await orHttpError(issueOf(membership, report));
	const remarks = open ? await orHttpError(listComments(membership, params.id)) : [];
	const { id, title, client, clientContact } = report.dossier;
	return {
		report: { ...report, dossier: { id, title, client, clientContact } },
		open,
		runs,
		duties: duties.map((duty) => ({ message: duty.message, href: placeLink(duty.place, report, runs) })),
		issue,
		/** As printed where it is issued, as it would be now otherwise. */
		addressee: issue?.printed.addressee ?? [client, clientContact].filter(Boolean).join(', '),
		results:
			issue?.printed.results ??
			report.runIds.flatMap((run) => runs.find((choice) => choice.id === run)?.title ?? []),
		review: await orHttpError(reviewOf(membership, params.id)),
		remarks,
		places: Object.fromEntries(
			remarks.map(({ place }) => [
				place,
				{ label: placeName(place, runs), href: placeLink(place, report, runs) }
			])
		),
		mayWrite: can(membership, 'report.write'),
		mayIssue: can(membership, 'report.issue'),
		mayPay: can(membership, 'billing.manage'),
		mayAnswer: can(membership, 'report.comment') && can(membership, 'report.write')
	};
};

function changeFrom(form: FormData): unknown {
	const field = (name: string) => textOf(form, name);
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

/** Keeps the answers that were typed beside the fields. @returns faults by their fields */
async function keepAnswers(event: RequestEvent, form: FormData): Promise<Record<string, string>> {
	const faults: Record<string, string> = {};
	for (const { commentId, body } of answersIn(form)) {
		if (!isUuid(commentId)) continue;
		const kept = await orFormFault(event, answerComment(event.locals.membership, commentId, { body }));
		if ('fault' in kept)
			faults[answerField(commentId)] = Object.values(kept.fault.data.errors)[0] ?? 'This could not be kept.';
	}
	return faults;
}

export const actions: Actions = {
	save: async (event) => {
		const { locals, params, request } = event;
		const form = await request.formData();
		const values = { ...typedValues(form), chosenRuns: form.getAll('runIds').map(String).join(' ') };
		const outcome = await orFormFault(
			event,
			saveReport(locals.membership, params.id, changeFrom(form)),
			values
		);
		if ('fault' in outcome) return outcome.fault;
		const faults = await keepAnswers(event, form);
		if (Object.keys(faults).length > 0) {
			const left = Object.entries(values).filter(
				([name]) => !name.startsWith(answerField('')) || name in faults
			);
			const version = String(outcome.data);
			return fail(400, { errors: faults, values: { ...Object.fromEntries(left), version } });
		}
		const next = form.get('next');
		if (next === 'issue') redirect(303, `/reports/${params.id}/issue`);
		if (next === 'send') redirect(303, `/reports/${params.id}/send`);
		if (next !== 'preview') return { saved: true, version: outcome.data };
		const preview = await orFormFault(event, requestPreview(locals.membership, params.id), values);
		if ('fault' in preview) return preview.fault;
		redirect(303, `/reports/${params.id}/previews/${preview.data}`);
	},
	recall: async (event) => {
		const recalled = await orFormFault(event, recallReview(event.locals.membership, event.params.id));
		if ('fault' in recalled) return recalled.fault;
		redirect(303, `/reports/${event.params.id}?done=recalled`);
	},
	reopen: async (event) => {
		const reopened = await orFormFault(event, reopenReport(event.locals.membership, event.params.id));
		if ('fault' in reopened) return reopened.fault;
		redirect(303, `/reports/${event.params.id}?done=reopened`);
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
