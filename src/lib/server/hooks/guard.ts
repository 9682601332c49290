import { redirect, type Handle, type RequestEvent } from '@sveltejs/kit';
import { homeOf } from '../access/home';

/** Pages of a signed-in person that need no organisation yet. */
const withoutOrganisation = new Set(['/(app)/organisation/new', '/(app)/account']);

/**
 * Everything under (app), pages, actions and endpoints alike, is for signed-in members. The use cases check again; this
 * is what sends a reader to the right page instead of to an error.
 */
export const guard: Handle = async ({ event, resolve }) => {
	const { locals, route, url, request } = event;
	if (!route.id?.startsWith('/(app)')) return resolve(event);
	if (locals.person === null) {
		if (!isForPage(event)) {
			return Response.json({ message: 'Please sign in again.' }, { status: 401 });
		}
		// Back to the page, not to one of its actions.
		const query = new URLSearchParams([...url.searchParams].filter(([name]) => !name.startsWith('/')));
		const back = url.pathname + (query.size > 0 ? `?${query}` : '');
		const expired = request.method === 'POST' ? '&notice=expired' : '';
		redirect(303, `/sign-in?returnTo=${encodeURIComponent(back)}${expired}`);
	}
	if (locals.membership === null && !withoutOrganisation.has(route.id)) {
		// Somebody who was taken out meanwhile, too: their open pages ask on for a while.
		if (!isForPage(event)) {
			return Response.json({ message: 'This does not exist, or you have no access to it.' }, { status: 404 });
		}
		redirect(303, homeOf(null));
	}
	return resolve(event);
};

/** A page, its data or one of its forms, rather than an endpoint called by a script: it can show the way to sign in. */
function isForPage({ request: { headers }, isDataRequest }: RequestEvent): boolean {
	return (
		isDataRequest ||
		headers.get('x-sveltekit-action') === 'true' ||
		headers.get('accept')?.includes('text/html') === true
	);
}
