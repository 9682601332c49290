import type { Handle } from '@sveltejs/kit';
import { randomUUID } from 'node:crypto';

/** Gives each request a number of its own, in the log and in the answer's header. A number from outside is not taken. */
export const requestId: Handle = async ({ event, resolve }) => {
	event.locals.requestId = randomUUID();
	event.locals.person = null;
	event.locals.sessionId = null;
	event.locals.membership = null;
	const response = await resolve(event);
	response.headers.set('x-request-id', event.locals.requestId);
	return response;
};
