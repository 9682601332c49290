import { redirect } from '@sveltejs/kit';
import { signUpSchema } from '$lib/schemas/accounts';
import { sourceOf } from '$lib/server/access/limit';
import { rememberAddress, rememberedAddress } from '$lib/server/accounts/pending-address';
import { signUp } from '$lib/server/accounts/sign-up';
import { orFormFault, readForm, typedValues } from '$lib/server/http/forms';
import { safeReturnTo } from '$lib/server/http/return-to';
import { withReturn } from '$lib/with-return';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = ({ cookies, url }) => ({
	email: rememberedAddress(cookies),
	returnTo: safeReturnTo(url.searchParams.get('returnTo'), '')
});

export const actions: Actions = {
	default: async (event) => {
		const form = await event.request.formData();
		const read = readForm(form, signUpSchema, ['password']);
		if ('fault' in read) return read.fault;
		const values = typedValues(form, ['password']);
		const returnTo = safeReturnTo(values.returnTo, '');
		const work = signUp({ ...read.data, returnTo }, sourceOf(event.getClientAddress()));
		const done = await orFormFault(event, work, values);
		if ('fault' in done) return done.fault;
		rememberAddress(event.cookies, read.data.email);
		redirect(303, withReturn('/sign-up/confirm', returnTo));
	}
};
