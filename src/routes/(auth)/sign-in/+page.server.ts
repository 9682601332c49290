import { redirect } from '@sveltejs/kit';
import { signInSchema } from '$lib/schemas/accounts';
import { homeOf } from '$lib/server/access/home';
import { signIn } from '$lib/server/accounts/auth';
import { rememberAddress } from '$lib/server/accounts/pending-address';
import { UnconfirmedAddressError } from '$lib/server/accounts/sign-in';
import { orFormFault, readForm, typedValues } from '$lib/server/http/forms';
import { safeReturnTo } from '$lib/server/http/return-to';
import type { Actions, PageServerLoad } from './$types';

const notices: Readonly<Record<string, { lead: string; text: string }>> = {
	expired: { lead: 'Your session has ended.', text: 'Sign in again to go on.' },
	'signed-out': { lead: 'You are signed out', text: 'of this browser.' },
	'password-changed': { lead: 'Your password is changed.', text: 'Sign in with the new one.' },
	confirmed: { lead: 'Your address is confirmed.', text: 'Sign in to go on.' }
};

export const load: PageServerLoad = ({ locals, url }) => {
	const returnTo = safeReturnTo(url.searchParams.get('returnTo'), '');
	if (locals.person !== null) redirect(303, returnTo || homeOf(locals.membership));
	return { returnTo, notice: notices[url.searchParams.get('notice') ?? ''] };
};

export const actions: Actions = {
	default: async (event) => {
		const form = await event.request.formData();
		const values = typedValues(form, ['password']);
		const read = readForm(form, signInSchema, ['password']);
		if ('fault' in read) return read.fault;
		const work = signIn(event, read.data).catch((cause: unknown) => {
			if (cause instanceof UnconfirmedAddressError) rememberAddress(event.cookies, read.data.email);
			throw cause;
		});
		const done = await orFormFault(event, work, values);
		if ('fault' in done) return done.fault;
		// Where a person starts is known once they are signed in: this page then leads on.
		redirect(303, safeReturnTo(values.returnTo, '/sign-in'));
	}
};
