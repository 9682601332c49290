import { and, asc, eq, sql } from 'drizzle-orm';
import { recordAudit } from '../access/audit';
import { requireAction } from '../access/can';
import { NotFoundError } from '../access/errors';
import type { Membership } from '../access/membership';
import type { Person } from '../accounts/person';
import { database, type Database, type Queryable } from '../db';
import { dossierGuests, users } from '../db/schema';
import { findDossier, type Dossier } from '../dossiers/find';
import { listOpenInvitations, type OpenInvitation } from './invitations/open';
import { listMembers, type Member } from './members';

export interface Guest {
	userId: string;
	name: string;
	email: string;
	since: Date;
}

export interface DossierPeople {
	dossier: Pick<Dossier, 'id' | 'title'>;
	/** Members who may read it; null where the reader is a guest, who does not see the organisation. */
	members: Member[] | null;
	/** A guest sees themselves alone. */
	guests: Guest[];
	/** Empty for who may not manage guests. */
	invitations: OpenInvitation[];
}

async function guestsOf(membership: Membership, dossierId: string, db: Queryable): Promise<Guest[]> {
	return db
		.select({
			userId: users.id,
			name: users.name,
			email: users.email,
			since: dossierGuests.createdAt
		})
		.from(dossierGuests)
		.innerJoin(users, eq(users.id, dossierGuests.userId))
		.where(
			and(
				eq(dossierGuests.dossierId, dossierId),
				eq(dossierGuests.organisationId, membership.organisationId),
				membership.onlyDossiers === null ? undefined : eq(dossierGuests.userId, membership.userId)
			)
		)
		.orderBy(asc(sql`lower(${users.name})`), asc(users.email));
}

/** Everybody who may read a dossier, as far as the reader may know. @throws NotFoundError */
export async function peopleOfDossier(
	membership: Membership | null,
	dossierId: string,
	db: Queryable = database()
): Promise<DossierPeople> {
	requireAction(membership, 'dossier.read');
	const { id, title } = await findDossier(db, membership, dossierId);
	const isGuest = membership.onlyDossiers !== null;
	const all = isGuest ? null : await listMembers(membership, db);
	return {
		dossier: { id, title },
		members: all?.filter(({ roles }) => roles.some((role) => role !== 'billing')) ?? null,
		guests: await guestsOf(membership, dossierId, db),
		invitations: await listOpenInvitations(membership, { kind: 'guest', dossierId }, db)
	};
}

/**
 * Ends a guest's access, from their next request on; what they wrote stays.
 * @throws NotFoundError where they are no guest of the dossier
 */
export async function endGuestAccess(
	membership: Membership | null,
	dossierId: string,
	userId: string,
	db: Database = database()
): Promise<void> {
	requireAction(membership, 'guests.manage');
	await db.transaction(async (tx) => {
		await findDossier(tx, membership, dossierId);
		await dropGuest(tx, membership.organisationId, dossierId, userId);
		await recordAudit(tx, membership, 'guests.end', userId, { dossier: dossierId });
	});
}

/** A guest leaves a dossier by themselves. @throws NotFoundError where they are no guest of it */
export async function leaveDossier(
	person: Person,
	membership: Membership | null,
	dossierId: string,
	db: Database = database()
): Promise<void> {
	if (membership === null) throw new NotFoundError('dossier');
	const { organisationId } = membership;
	await db.transaction(async (tx) => {
		await dropGuest(tx, organisationId, dossierId, person.id);
		await recordAudit(tx, { organisationId, userId: person.id }, 'guests.leave', person.id, {
			dossier: dossierId
		});
	});
}

async function dropGuest(
	tx: Queryable,
	organisationId: string,
	dossierId: string,
	userId: string
): Promise<void> {
	const gone = await tx
		.delete(dossierGuests)
		.where(
			and(
				eq(dossierGuests.organisationId, organisationId),
				eq(dossierGuests.dossierId, dossierId),
				eq(dossierGuests.userId, userId)
			)
		)
		.returning({ userId: dossierGuests.userId });
	if (gone.length === 0) throw new NotFoundError('guest');
}
