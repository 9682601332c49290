import { redirect } from '@sveltejs/kit';
import { dossierInput } from '$lib/schemas/dossier';
import { requireAction } from '$lib/server/access/can';
import { createDossier } from '$lib/server/dossiers/create';
import { orHttpError } from '$lib/server/http/errors';
import { orFormFault, readForm, typedValues } from '$lib/server/http/forms';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals }) => {
	await orHttpError((async () => requireAction(locals.membership, 'dossier.write'))());
};

export const actions: Actions = {
	default: async (event) => {
		const form = await event.request.formData();
		const read = readForm(form, dossierInput);
		if ('fault' in read) return read.fault;
		const made = await orFormFault(
			event,
			createDossier(event.locals.membership, read.data),
			typedValues(form)
		);
		if ('fault' in made) return made.fault;
		redirect(303, `/dossiers/${made.data}`);
	}
};
