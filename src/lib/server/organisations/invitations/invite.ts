import { and, eq, isNull, sql } from 'drizzle-orm';
import { recordAudit } from '../../access/audit';
import { requireAction } from '../../access/can';
import { InvalidInputError } from '../../access/errors';
import type { Membership, MemberRole } from '../../access/membership';
import { normaliseEmail } from '../../accounts/email';
import { hashToken, newToken } from '../../accounts/tokens';
import { database, type Database, type Transaction } from '../../db';
import { dossierGuests, invitations, memberships, users } from '../../db/schema';
import { findDossier } from '../../dossiers/find';
import { lockMembers } from '../lock';
import { requireRoles } from '../members';
import { invitationMail } from './mails';
import { inviterName, paceInvitations, sendInvitation, type Sending } from './send';
import { newExpiry, unanswered } from './state';

function refuseAddress(message: string): never {
	throw new InvalidInputError(message, { email: message });
}

/** @throws InvalidInputError where the address is a member's */
async function refuseMember(tx: Transaction, membership: Membership, email: string): Promise<void> {
	const [member] = await tx
		.select({ name: users.name })
		.from(memberships)
		.innerJoin(users, eq(users.id, memberships.userId))
		.where(
			and(
				eq(memberships.organisationId, membership.organisationId),
				eq(sql`lower(${users.email})`, normaliseEmail(email))
			)
		);
	if (member !== undefined) refuseAddress(`${member.name} is a member already.`);
}

/** One open invitation for one address and purpose: inviting again renews it, and its older link stops working. */
async function keep(
	tx: Transaction,
	membership: Membership,
	given: { kind: 'member' | 'guest'; email: string; roles: MemberRole[]; dossierId: string | null }
): Promise<string> {
	const token = newToken();
	const renewed = {
		tokenHash: hashToken(token),
		roles: given.roles,
		invitedBy: membership.userId,
		sentAt: sql`now()`,
		expiresAt: newExpiry
	};
	// One at a time in an organisation, so that of two clicks the second finds the first one's.
	await lockMembers(tx, membership.organisationId);
	const again = await tx
		.update(invitations)
		.set(renewed)
		.where(
			and(
				eq(invitations.organisationId, membership.organisationId),
				eq(sql`lower(${invitations.email})`, given.email),
				given.dossierId === null ? isNull(invitations.dossierId) : eq(invitations.dossierId, given.dossierId),
				unanswered
			)
		)
		.returning({ id: invitations.id });
	const [row] =
		again.length > 0
			? again
			: await tx
					.insert(invitations)
					.values({ ...given, ...renewed, organisationId: membership.organisationId })
					.returning({ id: invitations.id });
	if (row === undefined) throw new Error('The invitation was not stored.');
	await recordAudit(tx, membership, 'invitations.send', row.id, {
		kind: given.kind,
		roles: given.roles,
		dossier: given.dossierId
	});
	return token;
}

/**
 * Invites somebody to become a member. Says the same whether or not the address has an account.
 * @throws InvalidInputError where they are one already, TooManyRequestsError
 */
export async function inviteMember(
	membership: Membership | null,
	input: { email: string; roles: readonly MemberRole[] },
	db: Database = database()
): Promise<Sending> {
	requireAction(membership, 'members.manage');
	requireRoles(input.roles);
	const email = normaliseEmail(input.email);
	await paceInvitations(membership, email, db);
	const mail = await db.transaction(async (tx) => {
		await refuseMember(tx, membership, email);
		const roles = [...input.roles];
		const token = await keep(tx, membership, { kind: 'member', email, roles, dossierId: null });
		const inviter = await inviterName(membership, tx);
		return invitationMail(
			{ email, inviter, organisation: membership.organisationName, roles, dossier: null },
			token
		);
	});
	return sendInvitation(email, mail);
}

/**
 * Invites somebody to read and review one dossier as a guest, free of charge.
 * @throws NotFoundError, InvalidInputError where they may read it already, TooManyRequestsError
 */
export async function inviteGuest(
	membership: Membership | null,
	dossierId: string,
	input: { email: string },
	db: Database = database()
): Promise<Sending> {
	requireAction(membership, 'guests.manage');
	const email = normaliseEmail(input.email);
	await findDossier(db, membership, dossierId);
	await paceInvitations(membership, email, db);
	const mail = await db.transaction(async (tx) => {
		const dossier = await findDossier(tx, membership, dossierId);
		await refuseMember(tx, membership, email);
		const [guest] = await tx
			.select({ name: users.name })
			.from(dossierGuests)
			.innerJoin(users, eq(users.id, dossierGuests.userId))
			.where(and(eq(dossierGuests.dossierId, dossierId), eq(sql`lower(${users.email})`, email)));
		if (guest !== undefined) refuseAddress(`${guest.name} is a guest of this dossier already.`);
		const token = await keep(tx, membership, { kind: 'guest', email, roles: [], dossierId });
		const inviter = await inviterName(membership, tx);
		return invitationMail(
			{ email, inviter, organisation: membership.organisationName, roles: [], dossier: dossier.title },
			token
		);
	});
	return sendInvitation(email, mail);
}
