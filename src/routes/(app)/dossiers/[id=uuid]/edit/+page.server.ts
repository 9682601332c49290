import { error, redirect } from '@sveltejs/kit';
import { dossierInput, startedFrom } from '$lib/schemas/dossier';
import { openDossierTo } from '$lib/server/dossiers/show';
import { updateDossier } from '$lib/server/dossiers/update';
import { orHttpError } from '$lib/server/http/errors';
import { orFormFault, readForm, typedValues } from '$lib/server/http/forms';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params }) => {
	const { id, version, ...fields } = await orHttpError(
		openDossierTo('dossier.write', locals.membership, params.id)
	);
	return { id, version, values: dossierInput.parse(fields) };
};

export const actions: Actions = {
	default: async (event) => {
		const { locals, params, request } = event;
		const form = await request.formData();
		const version = startedFrom.safeParse(form.get('version'));
		if (!version.success)
			error(400, 'The form was sent without the save that it started from. Open it again.');
		const read = readForm(form, dossierInput);
		if ('fault' in read) return read.fault;
		const work = updateDossier(locals.membership, params.id, read.data, version.data);
		const saved = await orFormFault(event, work, typedValues(form));
		if ('fault' in saved) return saved.fault;
		redirect(303, `/dossiers/${params.id}`);
	}
};
