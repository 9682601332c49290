import { and, asc, eq, sql } from 'drizzle-orm';
import { recordAudit } from '../access/audit';
import { can, requireAction } from '../access/can';
import { InvalidInputError, NotFoundError } from '../access/errors';
import type { Membership, MemberRole } from '../access/membership';
import type { Person } from '../accounts/person';
import { seatsOf, type Seats } from '../billing/seats';
import { database, type Database, type Queryable, type Transaction } from '../db';
import { dossierGuests, memberships, users } from '../db/schema';
import { revokeOpenOf } from './invitations/withdraw';
import { lockMembers, memberOf, requireOwner } from './lock';

export interface Member {
	userId: string;
	name: string;
	email: string;
	roles: MemberRole[];
	since: Date;
}

/** Everybody in the organisation, by name. */
export async function listMembers(
	membership: Membership | null,
	db: Queryable = database()
): Promise<Member[]> {
	requireAction(membership, 'members.read');
	return db
		.select({
			userId: users.id,
			name: users.name,
			email: users.email,
			roles: memberships.roles,
			since: memberships.createdAt
		})
		.from(memberships)
		.innerJoin(users, eq(users.id, memberships.userId))
		.where(eq(memberships.organisationId, membership.organisationId))
		.orderBy(asc(sql`lower(${users.name})`), asc(users.email));
}

/** How many seats are taken, and how many there are. */
export async function countSeats(membership: Membership | null, db: Queryable = database()): Promise<Seats> {
	requireAction(membership, 'members.read');
	return seatsOf(membership.organisationId, db);
}

/**
 * Gives a member other roles, which count from their next request on. Invitations that they sent and could not send
 * any more are revoked.
 * @throws ConflictError when the organisation would be left without an owner
 */
export async function changeRoles(
	membership: Membership | null,
	userId: string,
	roles: readonly MemberRole[],
	db: Database = database()
): Promise<void> {
	requireAction(membership, 'members.manage');
	requireRoles(roles);
	await db.transaction(async (tx) => {
		await lockMembers(tx, membership.organisationId);
		const changed = await tx
			.update(memberships)
			.set({ roles: [...roles] })
			.where(memberOf(membership.organisationId, userId))
			.returning({ userId: memberships.userId });
		if (changed.length === 0) throw new NotFoundError('member');
		await requireOwner(tx, membership.organisationId);
		await recordAudit(tx, membership, 'members.roles', userId, { roles: [...roles] });
		const now: Membership = { ...membership, userId, roles };
		if (!can(now, 'members.manage')) await revokeOpenOf(tx, membership, userId, 'member');
		if (!can(now, 'guests.manage')) await revokeOpenOf(tx, membership, userId, 'guest');
	});
}

/** What goes with a membership: being a guest beside it, and the invitations that the person sent. */
async function dropMember(
	tx: Transaction,
	by: Pick<Membership, 'organisationId' | 'userId'>,
	userId: string
): Promise<{ revoked: number }> {
	await lockMembers(tx, by.organisationId);
	const removed = await tx
		.delete(memberships)
		.where(memberOf(by.organisationId, userId))
		.returning({ userId: memberships.userId });
	if (removed.length === 0) throw new NotFoundError('member');
	await requireOwner(tx, by.organisationId);
	await tx
		.delete(dossierGuests)
		.where(and(eq(dossierGuests.organisationId, by.organisationId), eq(dossierGuests.userId, userId)));
	const revoked =
		(await revokeOpenOf(tx, by, userId, 'member')) + (await revokeOpenOf(tx, by, userId, 'guest'));
	return { revoked };
}

/**
 * Takes somebody out of the organisation, from their next request on; what they wrote stays. Open invitations that
 * they sent are revoked.
 * @returns how many invitations that were
 * @throws ConflictError when the organisation would be left without an owner
 */
export async function removeMember(
	membership: Membership | null,
	userId: string,
	db: Database = database()
): Promise<{ revoked: number }> {
	requireAction(membership, 'members.manage');
	return db.transaction(async (tx) => {
		const dropped = await dropMember(tx, membership, userId);
		await recordAudit(tx, membership, 'members.remove', userId);
		return dropped;
	});
}

/**
 * A member leaves by themselves, whatever their role.
 * @throws NotFoundError when they are none, ConflictError when they are the last owner
 */
export async function leaveOrganisation(
	person: Person,
	organisationId: string,
	db: Database = database()
): Promise<void> {
	const by = { organisationId, userId: person.id };
	await db.transaction(async (tx) => {
		await dropMember(tx, by, person.id);
		await recordAudit(tx, by, 'members.leave', person.id);
	});
}

/** @throws InvalidInputError where no role is given */
export function requireRoles(roles: readonly MemberRole[]): void {
	if (roles.length > 0) return;
	const message = 'Choose at least one role.';
	throw new InvalidInputError(message, { roles: message });
}
