import { redirect } from '@sveltejs/kit';
import { signUpSchema } from '$lib/schemas/accounts';
import { sourceOf } from '$lib/server/access/limit';
import { rememberAddress } from '$lib/server/accounts/pending-address';
import { signUp } from '$lib/server/accounts/sign-up';
import { orFormFault, readForm, typedValues } from '$lib/server/http/forms';
import type { Actions } from './$types';

export const actions: Actions = {
	default: async (event) => {
		const form = await event.request.formData();
		const read = readForm(form, signUpSchema, ['password']);
		if ('fault' in read) return read.fault;
		const work = signUp(read.data, sourceOf(event.getClientAddress()));
		const done = await orFormFault(event, work, typedValues(form, ['password']));
		if ('fault' in done) return done.fault;
		rememberAddress(event.cookies, read.data.email);
		redirect(303, '/sign-up/confirm');
	}
};
