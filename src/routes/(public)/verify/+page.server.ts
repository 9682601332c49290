import { fail, redirect } from '@sveltejs/kit';
import { orFormFault, typedValues } from '$lib/server/http/forms';
import { checkFile } from '$lib/server/verification/check-file';
import { normaliseCode } from '$lib/server/verification/code';
import { describeCheck } from '$lib/server/verification/describe-check';
import { publishedRoot } from '$lib/server/verification/published-root';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async () => {
	const { fingerprint, validTo } = await publishedRoot();
	return { root: { fingerprint, validTo } };
};

export const actions: Actions = {
	file: async (event) => {
		const form = await event.request.formData();
		const done = await orFormFault(event, checkFile(form.get('file'), event.getClientAddress()));
		return 'fault' in done ? done.fault : { check: describeCheck(done.data) };
	},
	code: async ({ request }) => {
		const values = typedValues(await request.formData());
		const code = normaliseCode(values.code ?? '');
		if (code === undefined) {
			const message = 'Enter the eight characters printed on page one, such as 8KQ2-7MTR.';
			return fail(400, { errors: { code: message } as Record<string, string>, values });
		}
		redirect(303, `/verify/${code}`);
	}
};
