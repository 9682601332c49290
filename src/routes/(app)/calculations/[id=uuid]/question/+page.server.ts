import { submitQuestion } from '$lib/server/calculations/submit';
import { finishStep } from '$lib/server/http/step-action';
import type { Actions } from './$types';

export const actions: Actions = {
	default: async ({ request, locals, params }) => {
		const form = await request.formData();
		return finishStep(params.id, 'question', form, submitQuestion(locals.membership, params.id, form));
	}
};
