import { redirect } from '@sveltejs/kit';
import { signOut } from '$lib/server/accounts/auth';
import type { RequestHandler } from './$types';

export const POST: RequestHandler = async (event) => {
	await signOut(event);
	redirect(303, '/sign-in?notice=signed-out');
};
