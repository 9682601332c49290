import { redirect } from '@sveltejs/kit';
import { orHttpError } from '$lib/server/http/errors';
import { orFormFault } from '$lib/server/http/forms';
import { dutiesOf, issueOf, issueReport } from '$lib/server/reports/issue';
import { getReport, runChoices } from '$lib/server/reports/load';
import { placeLink } from '$lib/server/reports/places';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params }) => {
	const report = await orHttpError(getReport(locals.membership, params.id));
	if ((await orHttpError(issueOf(locals.membership, report))) !== null)
		redirect(307, `/reports/${params.id}`);
	const runs = await orHttpError(runChoices(locals.membership, report.dossier.id, report.runIds));
	const duties = await orHttpError(dutiesOf(locals.membership, report));
	const { number, revision, title, text, dossier } = report;
	return {
		report: { id: report.id, number, revision, title, text, client: dossier.client },
		organisation: locals.membership?.organisationName ?? '',
		runs: runs.filter(({ id }) => report.runIds.includes(id)),
		duties: duties.map((duty) => ({ message: duty.message, href: placeLink(duty.place, report, runs) }))
	};
};

export const actions: Actions = {
	default: async (event) => {
		const outcome = await orFormFault(event, issueReport(event.locals.membership, event.params.id));
		if ('fault' in outcome) return outcome.fault;
		redirect(303, `/reports/${event.params.id}`);
	}
};
