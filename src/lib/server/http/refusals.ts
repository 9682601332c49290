import { getRequestEvent } from '$app/server';
import type { RequestEvent } from '@sveltejs/kit';
import { log } from '../log';

/** The request under way, or undefined outside of one. */
function requestUnderWay(): RequestEvent | undefined {
	try {
		return getRequestEvent();
	} catch {
		return undefined;
	}
}

/**
 * Leaves a line about a person who asked for what they may not see or do: many of them tell of somebody who tries ids
 * or rights. Neither the address asked for nor anything sent stands in it, since both may hold secrets.
 * @param status the answer's: 404 for what may not be seen, 403 for what may not be done
 */
export function noteRefusal(status: number): void {
	const event = status === 403 || status === 404 ? requestUnderWay() : undefined;
	if (event === undefined) return;
	const { person, membership, requestId } = event.locals;
	log.warn(
		{
			person: person?.id ?? null,
			organisation: membership?.organisationId ?? null,
			route: event.route.id,
			method: event.request.method,
			status,
			requestId
		},
		'access refused'
	);
}
