import { randomUUID } from 'node:crypto';
import type { Membership, MemberRole } from '$lib/server/access/membership';
import { hashPassword } from '$lib/server/accounts/passwords';
import { openSession } from '$lib/server/accounts/sessions';
import { hashToken, newToken } from '$lib/server/accounts/tokens';
import type { Database } from '$lib/server/db';
import {
	dossierGuests,
	exportGrants,
	invitations,
	memberships,
	organisations,
	passwords,
	users
} from '$lib/server/db/schema';
import { subjects, type Subject } from './entry';

/* People and organisations of the matrix, written straight to the database: no sign-in is counted. */

export const password = 'umbrella kettle voyage 9';
let hashed: Promise<string> | undefined;

export interface House {
	id: string;
	name: string;
	/** Makes what is needed. */
	author: Membership;
	/** Reads it. */
	reviewer: Membership;
}

export async function makePerson(db: Database, name: string): Promise<string> {
	hashed ??= hashPassword(password);
	const [row] = await db
		.insert(users)
		.values({ name, email: `${randomUUID()}@people.example`, emailVerified: new Date() })
		.returning({ id: users.id });
	if (row === undefined) throw new Error('No person was stored.');
	await db.insert(passwords).values({ userId: row.id, hash: await hashed });
	return row.id;
}

export async function join(
	db: Database,
	house: Pick<House, 'id' | 'name'>,
	name: string,
	roles: MemberRole[]
): Promise<Membership> {
	const userId = await makePerson(db, name);
	await addMember(db, house, userId, roles);
	return { organisationId: house.id, organisationName: house.name, userId, roles, onlyDossiers: null };
}

export async function addMember(
	db: Database,
	house: Pick<House, 'id'>,
	userId: string,
	roles: MemberRole[]
): Promise<void> {
	await db.insert(memberships).values({ organisationId: house.id, userId, roles });
}

/** An organisation with its author, and exports enough for the whole matrix. */
export async function makeHouse(db: Database, name: string, numberPrefix: string): Promise<House> {
	const [row] = await db
		.insert(organisations)
		.values({ name, numberPrefix, address: ['1 Weir Lane', 'Marrow Coast'], selfApproval: true })
		.returning({ id: organisations.id });
	if (row === undefined) throw new Error('No organisation was stored.');
	await db
		.insert(exportGrants)
		.values({ organisationId: row.id, kind: 'pack', key: `pack:matrix:${row.id}`, amount: 10_000 });
	const house = { id: row.id, name };
	return {
		...house,
		author: await join(db, house, `Author of ${name}`, ['author']),
		reviewer: await join(db, house, `Reviewer of ${name}`, ['reviewer'])
	};
}

export type Tokens = Readonly<Record<Subject, string | null>>;

/** One person for each column, members and guests of one organisation. */
export async function makeSubjects(
	db: Database,
	house: House,
	guestOf: { guest: readonly string[]; 'guest elsewhere': readonly string[] }
): Promise<{ userIds: Readonly<Record<Subject, string | null>>; tokens: Tokens }> {
	const userIds = {} as Record<Subject, string | null>;
	const tokens = {} as Record<Subject, string | null>;
	for (const subject of subjects) {
		if (subject === 'stranger') {
			userIds[subject] = tokens[subject] = null;
			continue;
		}
		let userId: string;
		if (subject === 'author' || subject === 'reviewer') userId = house[subject].userId;
		else if (subject === 'newcomer') userId = await makePerson(db, 'Newcomer');
		else if (subject === 'guest' || subject === 'guest elsewhere') {
			userId = await makePerson(db, `Person ${subject}`);
			for (const dossier of guestOf[subject]) await addGuest(db, house, dossier, userId);
		} else userId = (await join(db, house, `Person ${subject}`, [subject])).userId;
		userIds[subject] = userId;
		tokens[subject] = await openSession(userId, 'matrix', db);
	}
	return { userIds, tokens };
}

export async function addGuest(
	db: Database,
	house: Pick<House, 'id'>,
	dossierId: string,
	userId: string
): Promise<void> {
	await db
		.insert(dossierGuests)
		.values({ dossierId, userId, organisationId: house.id })
		.onConflictDoNothing();
}

/** An open invitation: as guest of a dossier, or into the organisation as a reader where there is none. */
export async function inviteTo(
	db: Database,
	house: House,
	email: string,
	dossierId: string | null
): Promise<{ id: string; token: string }> {
	const token = newToken();
	const [row] = await db
		.insert(invitations)
		.values({
			organisationId: house.id,
			kind: dossierId === null ? 'member' : 'guest',
			email,
			roles: dossierId === null ? ['reader'] : [],
			dossierId,
			tokenHash: hashToken(token),
			invitedBy: house.author.userId,
			expiresAt: new Date(Date.now() + 86_400_000)
		})
		.returning({ id: invitations.id });
	if (row === undefined) throw new Error('No invitation was stored.');
	return { id: row.id, token };
}
