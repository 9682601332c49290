import { recordAudit } from '../access/audit';
import { requireAction } from '../access/can';
import { ConflictError, InvalidInputError } from '../access/errors';
import type { Membership, MemberRole } from '../access/membership';
import { findAccountByEmail } from '../accounts/people';
import { database, type Database } from '../db';
import { memberships } from '../db/schema';
import { requireRoles } from './members';

/*
 * For demo data and tests alone; no route may import this (./set-up.test.ts). Everybody else comes in by an
 * invitation that they accept, and takes a seat.
 */

/**
 * Makes somebody with an account a member without asking them and without a seat.
 * @throws InvalidInputError when no confirmed account has the address, ConflictError when they are a member
 */
export async function enrolForSetUp(
	membership: Membership | null,
	input: { email: string; roles: readonly MemberRole[] },
	db: Database = database()
): Promise<void> {
	requireAction(membership, 'members.manage');
	requireRoles(input.roles);
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
