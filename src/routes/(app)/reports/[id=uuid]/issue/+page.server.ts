import { fail, redirect } from '@sveltejs/kit';
import { can } from '$lib/server/access/can';
import { NoExportsError } from '$lib/server/billing/errors';
import { exportsSentence } from '$lib/server/billing/overview';
import { orHttpError } from '$lib/server/http/errors';
import { orFormFault } from '$lib/server/http/forms';
import { dutiesOf, issueOf, issueReport } from '$lib/server/reports/issue';
import { getReportTo, runChoices } from '$lib/server/reports/load';
import { placeLink } from '$lib/server/reports/places';
import { reviewOf } from '$lib/server/reviews/state';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params }) => {
	const { membership } = locals;
	const report = await orHttpError(getReportTo('report.issue', membership, params.id));
	const issue = await orHttpError(issueOf(membership, report));
	if (issue !== null && issue.state !== 'failed') redirect(303, `/reports/${params.id}`);
	const runs = await orHttpError(runChoices(membership, report.dossier.id, report.runIds));
	const duties = await orHttpError(dutiesOf(membership, report));
	const review = await orHttpError(reviewOf(membership, params.id));
	const { number, revision, title, text, dossier, state } = report;
	const [round] = review.rounds;
	const approved = state === 'approved' && review.approval?.holds === true ? (round ?? null) : null;
	return {
		report: { id: report.id, number, revision, title, text, client: dossier.client },
		organisation: membership?.organisationName ?? '',
		runs: runs.filter(({ id }) => report.runIds.includes(id)),
		duties: duties.map((duty) => ({ message: duty.message, href: placeLink(duty.place, report, runs) })),
		approved,
		/** Nobody has approved it, and the organisation issues nothing without that, or it is with a reviewer. */
		reviewFirst:
			approved === null && (review.secondReaderWanted || state === 'in-review' || state === 'returned'),
		maySend: review.maySend,
		exports: await orHttpError(exportsSentence(membership)),
		mayPay: can(membership, 'billing.manage')
	};
};

export const actions: Actions = {
	default: async (event) => {
		let noExports = false;
		const work = issueReport(event.locals.membership, event.params.id).catch((cause: unknown) => {
			noExports = cause instanceof NoExportsError;
			throw cause;
		});
		const outcome = await orFormFault(event, work);
		if ('fault' in outcome) return fail(outcome.fault.status, { ...outcome.fault.data, noExports });
		redirect(303, `/reports/${event.params.id}`);
	}
};
