import { error, redirect } from '@sveltejs/kit';
import { readListQuery } from '$lib/lists/query';
import { dossierList } from '$lib/lists/shapes';
import { can } from '$lib/server/access/can';
import { deletedDossierTitle, restoreDossier } from '$lib/server/dossiers/delete';
import { listDossiers } from '$lib/server/dossiers/list';
import { orHttpError } from '$lib/server/http/errors';
import { idIn } from '$lib/server/http/ids';
import { waitingForMe } from '$lib/server/reviews/waiting';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, url }) => {
	const query = readListQuery(url.searchParams, dossierList);
	const deleted = idIn(url.searchParams, 'deleted');
	const [listed, deletedTitle, waiting] = await orHttpError(
		Promise.all([
			listDossiers(locals.membership, query),
			deleted === undefined ? undefined : deletedDossierTitle(locals.membership, deleted),
			waitingForMe(locals.membership)
		])
	);
	return {
		query,
		listed,
		waiting,
		deleted: deleted && deletedTitle ? { id: deleted, title: deletedTitle } : null,
		mayWrite: can(locals.membership, 'dossier.write')
	};
};

export const actions: Actions = {
	restore: async ({ locals, request }) => {
		const id = idIn(await request.formData(), 'id');
		if (id === undefined) error(400, 'The notice named nothing to bring back. Open the list again.');
		await orHttpError(restoreDossier(locals.membership, id));
		redirect(303, `/dossiers/${id}`);
	}
};
