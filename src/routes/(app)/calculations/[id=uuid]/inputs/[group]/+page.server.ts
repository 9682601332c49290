import { error } from '@sveltejs/kit';
import { methodById } from '$lib/methods';
import { submitGroup } from '$lib/server/calculations/submit';
import { finishStep } from '$lib/server/http/step-action';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ params, parent }) => {
	const { calculation } = await parent();
	const method = calculation.draft.method === null ? undefined : methodById(calculation.draft.method);
	if (!method?.groups.some((group) => group.id === params.group)) error(404, 'This step does not exist.');
};

export const actions: Actions = {
	default: async ({ request, locals, params }) => {
		const form = await request.formData();
		return finishStep(
			params.id,
			params.group,
			form,
			submitGroup(locals.membership, params.id, params.group, form)
		);
	}
};
