import { redirect } from '@sveltejs/kit';
import { resetSchema } from '$lib/schemas/accounts';
import { sourceOf } from '$lib/server/access/limit';
import { findReset, resetPassword } from '$lib/server/accounts/reset-password';
import { orFormFault, readForm } from '$lib/server/http/forms';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ params }) => ({ waiting: await findReset(params.token) });

export const actions: Actions = {
	default: async (event) => {
		const form = await event.request.formData();
		const read = readForm(form, resetSchema, ['password']);
		if ('fault' in read) return read.fault;
		const work = resetPassword(event.params.token, read.data.password, sourceOf(event.getClientAddress()));
		const done = await orFormFault(event, work);
		if ('fault' in done) return done.fault;
		redirect(303, '/sign-in?notice=password-changed');
	}
};
