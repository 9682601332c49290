import { redirect } from '@sveltejs/kit';
import { orHttpError } from '$lib/server/http/errors';
import { orFormFault } from '$lib/server/http/forms';
import { checkFile, lookUpCode } from '$lib/server/verification/check-file';
import { describeCheck } from '$lib/server/verification/describe-check';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ params, getClientAddress }) => {
	const known = await orHttpError(lookUpCode(params.code, getClientAddress()));
	if (known.code !== params.code) redirect(307, `/verify/${known.code}`);
	return { known };
};

export const actions: Actions = {
	default: async (event) => {
		const form = await event.request.formData();
		const work = checkFile(form.get('file'), event.getClientAddress(), event.params.code);
		const done = await orFormFault(event, work);
		return 'fault' in done ? done.fault : { check: describeCheck(done.data) };
	}
};
