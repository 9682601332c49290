import { redirect } from '@sveltejs/kit';
import { startRun } from '$lib/server/calculations/runs';
import { orFormFault } from '$lib/server/http/forms';
import type { Actions } from './$types';

export const actions: Actions = {
	default: async (event) => {
		const { locals, params } = event;
		const outcome = await orFormFault(event, startRun(locals.membership, params.id));
		if ('fault' in outcome) return outcome.fault;
		redirect(303, `/calculations/${params.id}/result`);
	}
};
