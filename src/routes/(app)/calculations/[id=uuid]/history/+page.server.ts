import { redirect } from '@sveltejs/kit';
import {
	deleteCalculation,
	duplicateCalculation,
	restoreCalculation,
	restoreVersion
} from '$lib/server/calculations/change';
import { getCalculation, listVersions } from '$lib/server/calculations/load';
import { orHttpError } from '$lib/server/http/errors';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params }) => ({
	versions: await orHttpError(listVersions(locals.membership, params.id))
});

export const actions: Actions = {
	bringBack: async ({ locals, params, request }) => {
		const version = Number((await request.formData()).get('version'));
		await orHttpError(restoreVersion(locals.membership, params.id, version));
		redirect(303, `/calculations/${params.id}/check`);
	},
	duplicate: async ({ locals, params }) => {
		const copy = await orHttpError(duplicateCalculation(locals.membership, params.id));
		redirect(303, `/calculations/${copy}/question`);
	},
	delete: async ({ locals, params }) => {
		const { dossierId } = await orHttpError(deleteCalculation(locals.membership, params.id));
		redirect(303, `/dossiers/${dossierId}?deleted-calculation=${params.id}#calculations`);
	},
	undo: async ({ locals, params }) => {
		await orHttpError(restoreCalculation(locals.membership, params.id));
		const { dossier } = await orHttpError(getCalculation(locals.membership, params.id));
		redirect(303, `/dossiers/${dossier.id}#calculations`);
	}
};
