import { redirect } from '@sveltejs/kit';
import { signOut } from '$lib/server/accounts/auth';
import { safeReturnTo } from '$lib/server/http/return-to';
import { withReturn } from '$lib/with-return';
import type { RequestHandler } from './$types';

export const POST: RequestHandler = async (event) => {
	const form = await event.request.formData().catch(() => new FormData());
	await signOut(event);
	const returnTo = form.get('returnTo');
	redirect(
		303,
		withReturn('/sign-in?notice=signed-out', safeReturnTo(typeof returnTo === 'string' ? returnTo : '', ''))
	);
};
