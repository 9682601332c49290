import { redirect } from '@sveltejs/kit';
import { openDossierTo } from '$lib/server/dossiers/show';
import { orHttpError } from '$lib/server/http/errors';
import { orFormFault, typedValues } from '$lib/server/http/forms';
import { createReport } from '$lib/server/reports/change';
import { runChoices } from '$lib/server/reports/load';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params, url }) => {
	const dossier = await orHttpError(openDossierTo('report.write', locals.membership, params.id));
	const wanted = url.searchParams.get('run');
	const runs = await orHttpError(runChoices(locals.membership, params.id, []));
	return {
		dossier: { id: dossier.id, title: dossier.title },
		runs,
		wanted: runs.find(({ id }) => id === wanted)?.id ?? ''
	};
};

export const actions: Actions = {
	default: async (event) => {
		const values = typedValues(await event.request.formData());
		const outcome = await orFormFault(
			event,
			createReport(event.locals.membership, event.params.id, {
				template: 'client-memo',
				runId: /^[0-9a-f-]{36}$/.test(values.run ?? '') ? (values.run ?? null) : null
			}),
			values
		);
		if ('fault' in outcome) return outcome.fault;
		redirect(303, `/reports/${outcome.data}`);
	}
};
