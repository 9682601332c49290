import { fail, redirect, type ActionFailure } from '@sveltejs/kit';
import { can } from '$lib/server/access/can';
import { orHttpError } from '$lib/server/http/errors';
import { orFormFault, textOf, typedValues, type FormFault } from '$lib/server/http/forms';
import { dutiesOf } from '$lib/server/reports/issue';
import { getReportTo, runChoices } from '$lib/server/reports/load';
import { placeLink } from '$lib/server/reports/places';
import { sendForReview } from '$lib/server/reviews/send';
import { reviewersFor, reviewOf } from '$lib/server/reviews/state';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params }) => {
	const { membership } = locals;
	const report = await orHttpError(getReportTo('report.write', membership, params.id));
	const choices = await orHttpError(reviewersFor(membership, params.id));
	const review = await orHttpError(reviewOf(membership, params.id));
	if (!review.maySend) redirect(303, `/reports/${params.id}`);
	const runs = await orHttpError(runChoices(membership, report.dossier.id, report.runIds));
	const duties = await orHttpError(dutiesOf(membership, report));
	const { id, number, revision, title, version } = report;
	return {
		report: { id, number, revision, title, version, dossierId: report.dossier.id },
		choices,
		/** Who was asked the last time is asked again, unless the author says otherwise. */
		askedBefore: review.rounds[0]?.askedOf.flatMap((person) => person.id ?? []) ?? [],
		unanswered: review.unanswered,
		duties: duties.map((duty) => ({ message: duty.message, href: placeLink(duty.place, report, runs) })),
		mayInvite: can(membership, 'guests.manage')
	};
};

/** What the report still owes is put right elsewhere: said on top, since no field of this page is at fault. */
function owed(fault: ActionFailure<FormFault>): ActionFailure<FormFault> {
	const { errors, values } = fault.data;
	const own = ['reviewers', 'note', 'form'];
	const elsewhere = Object.entries(errors).filter(([field]) => !own.includes(field));
	if (elsewhere.length === 0) return fault;
	const form = `Before somebody reviews it: ${elsewhere.map(([, message]) => message).join(' ')}`;
	return fail(fault.status, { errors: { form }, values });
}

export const actions: Actions = {
	default: async (event) => {
		const { locals, params, request } = event;
		const form = await request.formData();
		const reviewers = form.getAll('reviewers').map(String);
		const sent = await orFormFault(
			event,
			sendForReview(locals.membership, params.id, {
				reviewers,
				note: textOf(form, 'note'),
				baseVersion: Number(form.get('version'))
			}),
			{ ...typedValues(form), reviewers: reviewers.join(' ') }
		);
		if ('fault' in sent) return owed(sent.fault);
		redirect(303, `/reports/${params.id}?done=sent`);
	}
};
