import { redirect, type Handle, type RequestEvent } from '@sveltejs/kit';
import { readSession } from '../accounts/auth';
import type { Person } from '../accounts/person';
import { idIn } from '../http/ids';
import { chooseOrganisation, chosenOrganisation } from '../organisations/current';
import { currentMembership, membershipIn } from '../organisations/memberships';

const probes = new Set(['/healthz', '/readyz']);

/**
 * A link in a mail names the organisation that it is about, which need not be the one that its reader acts in. Where
 * they belong to it they act in it from here on; of any other nothing is said.
 */
async function followToOrganisation(event: RequestEvent, person: Person): Promise<void> {
	const wanted = idIn(event.url.searchParams, 'organisation');
	if (wanted === undefined || event.request.method !== 'GET') return;
	if ((await membershipIn(person, wanted)) === null) return;
	chooseOrganisation(event.cookies, wanted);
	const query = new URLSearchParams([...event.url.searchParams].filter(([name]) => name !== 'organisation'));
	redirect(303, event.url.pathname + (query.size > 0 ? `?${query}` : ''));
}

/** Fills `locals` with the signed-in person and the organisation that they act in, as both stand at this moment. */
export const authentication: Handle = async ({ event, resolve }) => {
	const session = probes.has(event.url.pathname) ? null : await readSession(event);
	if (session !== null) {
		event.locals.person = session.person;
		event.locals.sessionId = session.sessionId;
		await followToOrganisation(event, session.person);
		event.locals.membership = await currentMembership(session.person, chosenOrganisation(event.cookies));
	}
	return resolve(event);
};
