import { redirect } from '@sveltejs/kit';
import { latestRun } from '$lib/server/calculations/runs';
import { resultView } from '$lib/server/calculations/result-view';
import { startRun } from '$lib/server/calculations/runs';
import { isStale } from '$lib/server/calculations/stale';
import { orHttpError } from '$lib/server/http/errors';
import { orFormFault } from '$lib/server/http/forms';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, parent }) => {
	const { calculation } = await parent();
	const run = await orHttpError(latestRun(locals.membership, calculation.id));
	if (run === null || locals.membership === null) redirect(307, `/calculations/${calculation.id}/check`);
	const { id, state, progress, problem, finishedAt } = run;
	return {
		run: { id, state, progress, problem, finishedAt },
		stale: isStale(calculation.draft, run.draft),
		view: run.state === 'done' ? await resultView(locals.membership, calculation, run) : null
	};
};

export const actions: Actions = {
	default: async (event) => {
		const outcome = await orFormFault(event, startRun(event.locals.membership, event.params.id));
		if ('fault' in outcome) redirect(303, `/calculations/${event.params.id}/check`);
		redirect(303, `/calculations/${event.params.id}/result`);
	}
};
