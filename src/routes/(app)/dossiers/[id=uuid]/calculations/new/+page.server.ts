import { redirect } from '@sveltejs/kit';
import { createCalculation } from '$lib/server/calculations/change';
import { openDossierTo } from '$lib/server/dossiers/show';
import { orHttpError } from '$lib/server/http/errors';
import { orFormFault, typedValues } from '$lib/server/http/forms';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params }) => ({
	dossier: await orHttpError(openDossierTo('calculation.write', locals.membership, params.id))
});

export const actions: Actions = {
	default: async (event) => {
		const { locals, params, request } = event;
		const form = await request.formData();
		const values = typedValues(form);
		const kind =
			values.kind === 'check-claim' || values.kind === 'test-limit' ? values.kind : ('find-value' as const);
		const outcome = await orFormFault(
			event,
			createCalculation(locals.membership, params.id, { title: values.title ?? '', kind }),
			values
		);
		if ('fault' in outcome) return outcome.fault;
		redirect(303, `/calculations/${outcome.data}/method`);
	}
};
