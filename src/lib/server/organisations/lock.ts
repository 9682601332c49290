import { and, eq, sql } from 'drizzle-orm';
import { ConflictError } from '../access/errors';
import { lockOrganisation } from '../billing/standing';
import type { Transaction } from '../db';
import { memberships } from '../db/schema';

/**
 * One change of members at a time: two owners who demote each other at once must not both succeed, and of two who
 * come in at once the second must see the first.
 */
export async function lockMembers(tx: Transaction, organisationId: string): Promise<void> {
	await lockOrganisation(tx, organisationId);
}

/**
 * Checked after a change and inside its transaction, which the error rolls back.
 * @throws ConflictError where nobody is left who owns the organisation
 */
export async function requireOwner(tx: Transaction, organisationId: string): Promise<void> {
	const owners = await tx.$count(
		memberships,
		and(eq(memberships.organisationId, organisationId), sql`'owner' = any(${memberships.roles})`)
	);
	if (owners === 0) {
		throw new ConflictError('An organisation needs an owner. Make somebody else an owner first.');
	}
}

/** Condition for one membership. */
export function memberOf(organisationId: string, userId: string) {
	return and(eq(memberships.organisationId, organisationId), eq(memberships.userId, userId));
}
