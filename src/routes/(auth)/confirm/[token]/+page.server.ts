import { redirect } from '@sveltejs/kit';
import { confirmSchema } from '$lib/schemas/accounts';
import { sourceOf } from '$lib/server/access/limit';
import { signIn } from '$lib/server/accounts/auth';
import { confirmAddress, findConfirmation } from '$lib/server/accounts/sign-up';
import { orFormFault, readForm } from '$lib/server/http/forms';
import { safeReturnTo } from '$lib/server/http/return-to';
import { withReturn } from '$lib/with-return';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ params }) => ({ waiting: await findConfirmation(params.token) });

export const actions: Actions = {
	default: async (event) => {
		const form = await event.request.formData();
		const read = readForm(form, confirmSchema, ['password']);
		if ('fault' in read) return read.fault;
		const { password } = read.data;
		const work = confirmAddress(event.params.token, password, sourceOf(event.getClientAddress()));
		const done = await orFormFault(event, work);
		if ('fault' in done) return done.fault;
		const signedIn = await orFormFault(event, signIn(event, { email: done.data.email, password }));
		const returnTo = safeReturnTo(event.url.searchParams.get('returnTo'), '');
		if ('fault' in signedIn) redirect(303, withReturn('/sign-in?notice=confirmed', returnTo));
		// Without a place to go back to, the sign-in page leads a signed-in person home.
		redirect(303, returnTo || '/sign-in');
	}
};
