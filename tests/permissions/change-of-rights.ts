import { and, eq } from 'drizzle-orm';
import { memberships, dossierGuests } from '$lib/server/db/schema';
import { openSession } from '$lib/server/accounts/sessions';
import type { Values } from './entry';
import { addGuest, join, makePerson } from './people';
import { asRequest, outcomeOf, sendAs, type Session } from './requests';
import type { World } from './world';

/* A page left open, or a script that goes on asking, after the rights behind it have changed. */

async function sessionOf(world: World, userId: string): Promise<Session> {
	return { address: world.address, token: await openSession(userId, 'matrix', world.db), index: 30 };
}

/** What one session is answered: reading a dossier, asking how a run stands, saving a dossier. */
async function answers(world: World, session: Session, values: Values): Promise<Record<string, string>> {
	const common = { route: '', needs: 'session', done: '' } as const;
	const form = { title: 'Changed', version: '99' };
	const all = {
		reading: { ...common, what: 'page', at: '/dossiers/:dossier' },
		asking: { ...common, what: 'GET', at: '/api/runs/:run' },
		saving: { ...common, what: 'action default', at: '/dossiers/:dossier/edit', form }
	};
	const found: Record<string, string> = {};
	for (const [name, entry] of Object.entries(all)) {
		const answer = await sendAs(session, asRequest(entry, values, session));
		found[name] = outcomeOf(answer, world.address, values);
	}
	return found;
}

/** An author is made a reader and then taken out, with one session throughout. */
export async function ofMember(world: World): Promise<Record<string, string>[]> {
	const { db, house, own } = world;
	const { userId } = await join(db, house, 'Author for a while', ['author']);
	const session = await sessionOf(world, userId);
	const row = and(eq(memberships.userId, userId), eq(memberships.organisationId, house.id));
	const asAuthor = await answers(world, session, own);
	await db
		.update(memberships)
		.set({ roles: ['reader'] })
		.where(row);
	const asReader = await answers(world, session, own);
	await db.delete(memberships).where(row);
	return [asAuthor, asReader, await answers(world, session, own)];
}

/** A guest whose access to a dossier ends. */
export async function ofGuest(world: World): Promise<Record<string, string>[]> {
	const { db, house, own } = world;
	const userId = await makePerson(db, 'Guest for a while');
	await addGuest(db, house, own.dossier ?? '', userId);
	const session = await sessionOf(world, userId);
	const asGuest = await answers(world, session, own);
	await db.delete(dossierGuests).where(eq(dossierGuests.userId, userId));
	return [asGuest, await answers(world, session, own)];
}
