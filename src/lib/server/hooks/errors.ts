import type { HandleServerError } from '@sveltejs/kit';
import { log } from '../log';

/** Logs what went wrong under the request's number; the reader sees the number and no more. */
export const reportError: HandleServerError = ({ error, event, status, message }) => {
	if (status === 404) return { message: 'This page does not exist, or you have no access to it.' };
	const errorId = event.locals.requestId;
	const where = { errorId, method: event.request.method, route: event.route.id, status };
	if (status < 500) {
		log.warn(where, message);
		return { message, errorId };
	}
	log.error({ ...where, err: error, person: event.locals.person?.id ?? null }, 'request failed');
	return { message: 'Something failed on our side. Nothing that you saved before is lost.', errorId };
};
