import { redirect } from '@sveltejs/kit';
import { orHttpError } from '$lib/server/http/errors';
import { orFormFault, textOf, typedValues } from '$lib/server/http/forms';
import { getReportTo } from '$lib/server/reports/load';
import { approveReport } from '$lib/server/reviews/decide';
import { reviewView } from '$lib/server/reviews/view';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params, url }) => {
	await orHttpError(getReportTo('report.review', locals.membership, params.id));
	const view = await orHttpError(reviewView(locals.membership, params.id));
	/** The report as the reviewer read it, told by the page that led here. */
	return { view, seen: url.searchParams.get('digest') };
};

export const actions: Actions = {
	default: async (event) => {
		const { locals, params, request } = event;
		const form = await request.formData();
		const given = { statement: textOf(form, 'statement'), digest: textOf(form, 'digest') };
		const approved = await orFormFault(
			event,
			approveReport(locals.membership, params.id, given),
			typedValues(form)
		);
		if ('fault' in approved) return approved.fault;
		redirect(303, `/reports/${params.id}?done=approved`);
	}
};
