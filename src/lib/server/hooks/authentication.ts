import type { Handle } from '@sveltejs/kit';
import { readSession } from '../accounts/auth';
import { chosenOrganisation } from '../organisations/current';
import { currentMembership } from '../organisations/memberships';

const probes = new Set(['/healthz', '/readyz']);

/** Fills `locals` with the signed-in person and the organisation that they act in, as both stand at this moment. */
export const authentication: Handle = async ({ event, resolve }) => {
	const session = probes.has(event.url.pathname) ? null : await readSession(event);
	if (session !== null) {
		event.locals.person = session.person;
		event.locals.sessionId = session.sessionId;
		event.locals.membership = await currentMembership(session.person, chosenOrganisation(event.cookies));
	}
	return resolve(event);
};
