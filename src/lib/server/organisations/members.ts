import { and, asc, eq, sql } from 'drizzle-orm';
import { recordAudit } from '../access/audit';
import { requireAction } from '../access/can';
import { ConflictError, InvalidInputError, NotFoundError } from '../access/errors';
import { limit } from '../access/limit';
import type { Membership, MemberRole } from '../access/membership';
import { findAccountByEmail } from '../accounts/people';
import { database, type Database, type Queryable, type Transaction } from '../db';
import { memberships, organisations, users } from '../db/schema';

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

/**
 * Adds somebody who has an account already.
 * @throws InvalidInputError when no confirmed account has the address, ConflictError when they are a member,
 * TooManyRequestsError after 60 tries of one owner within an hour
 */
export async function addMember(
	membership: Membership | null,
	input: { email: string; roles: readonly MemberRole[] },
	db: Database = database()
): Promise<void> {
	requireAction(membership, 'members.manage');
	requireRoles(input.roles);
	// The answer tells whether an address has an account, so nobody may ask for many.
	await limit(`add-member:${membership.userId}`, 60, 3600, db);
	await db.transaction(async (tx) => {
		const account = await findAccountByEmail(tx, input.email);
		if (account === null || !account.confirmed) {
			const message = 'Nobody with this address has a confirmed account here.';
			throw new InvalidInputError(message, { email: message });
		}
		const added = await tx
			.insert(memberships)
			.values({
				organisationId: membership.organisationId,
				userId: account.id,
				roles: [...input.roles]
			})
			.onConflictDoNothing()
			.returning({ userId: memberships.userId });
		if (added.length === 0) throw new ConflictError('This person is a member already.');
		await recordAudit(tx, membership, 'members.add', account.id, { roles: [...input.roles] });
	});
}

/**
 * Gives a member other roles, which count from their next request on.
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
			.where(member(membership.organisationId, userId))
			.returning({ userId: memberships.userId });
		if (changed.length === 0) throw new NotFoundError('member');
		await requireOwner(tx, membership.organisationId);
		await recordAudit(tx, membership, 'members.roles', userId, { roles: [...roles] });
	});
}

/**
 * Takes somebody out of the organisation; what they wrote stays.
 * @throws ConflictError when the organisation would be left without an owner
 */
export async function removeMember(
	membership: Membership | null,
	userId: string,
	db: Database = database()
): Promise<void> {
	requireAction(membership, 'members.manage');
	await db.transaction(async (tx) => {
		await lockMembers(tx, membership.organisationId);
		const removed = await tx
			.delete(memberships)
			.where(member(membership.organisationId, userId))
			.returning({ userId: memberships.userId });
		if (removed.length === 0) throw new NotFoundError('member');
		await requireOwner(tx, membership.organisationId);
		await recordAudit(tx, membership, 'members.remove', userId);
	});
}

function member(organisationId: string, userId: string) {
	return and(eq(memberships.organisationId, organisationId), eq(memberships.userId, userId));
}

function requireRoles(roles: readonly MemberRole[]): void {
	if (roles.length > 0) return;
	const message = 'Choose at least one role.';
	throw new InvalidInputError(message, { roles: message });
}

/** One change of members at a time: two owners who demote each other at once must not both succeed. */
async function lockMembers(tx: Transaction, organisationId: string): Promise<void> {
	await tx
		.select({ id: organisations.id })
		.from(organisations)
		.where(eq(organisations.id, organisationId))
		.for('update');
}

/** Checked after the change and inside its transaction, which the error rolls back. */
async function requireOwner(tx: Transaction, organisationId: string): Promise<void> {
	const owners = await tx
		.select({ userId: memberships.userId })
		.from(memberships)
		.where(and(eq(memberships.organisationId, organisationId), sql`'owner' = any(${memberships.roles})`));
	if (owners.length === 0) {
		throw new ConflictError('An organisation needs an owner. Make somebody else an owner first.');
	}
}
