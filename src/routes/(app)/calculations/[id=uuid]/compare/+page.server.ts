import { error } from '@sveltejs/kit';
import { submitComparison } from '$lib/server/calculations/submit';
import { finishStep } from '$lib/server/http/step-action';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ parent }) => {
	const { calculation } = await parent();
	if (calculation.draft.claim === null && calculation.draft.limit === null)
		error(404, 'This step does not exist.');
};

export const actions: Actions = {
	default: async ({ request, locals, params }) => {
		const form = await request.formData();
		return finishStep(params.id, 'compare', form, submitComparison(locals.membership, params.id, form));
	}
};
