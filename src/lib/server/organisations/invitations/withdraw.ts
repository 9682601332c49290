import { and, eq, isNull, sql } from 'drizzle-orm';
import { recordAudit } from '../../access/audit';
import { can, requireAction } from '../../access/can';
import { NotFoundError } from '../../access/errors';
import type { Membership } from '../../access/membership';
import { inReach } from '../../access/reach';
import { hashToken, newToken } from '../../accounts/tokens';
import { database, type Database, type Queryable, type Transaction } from '../../db';
import { dossiers, invitations } from '../../db/schema';
import { invitationMail } from './mails';
import { inviterName, paceInvitations, sendInvitation, type Sending } from './send';
import { newExpiry, unanswered } from './state';

/**
 * An unanswered invitation that the member may manage.
 * @throws NotFoundError where there is none, ForbiddenError where another role manages it
 */
async function findManaged(db: Queryable, membership: Membership | null, id: string) {
	if (!can(membership, 'guests.manage')) requireAction(membership, 'members.manage');
	if (membership === null) throw new NotFoundError('invitation');
	const [row] = await db
		.select({
			id: invitations.id,
			kind: invitations.kind,
			email: invitations.email,
			roles: invitations.roles,
			dossierId: dossiers.id,
			dossier: dossiers.title
		})
		.from(invitations)
		.leftJoin(dossiers, and(eq(dossiers.id, invitations.dossierId), isNull(dossiers.deletedAt)))
		.where(
			and(
				eq(invitations.id, id),
				eq(invitations.organisationId, membership.organisationId),
				membership.onlyDossiers === null ? undefined : inReach(membership, invitations.dossierId),
				unanswered
			)
		);
	if (row === undefined || (row.kind === 'guest' && row.dossierId === null)) {
		throw new NotFoundError('invitation');
	}
	requireAction(membership, row.kind === 'member' ? 'members.manage' : 'guests.manage');
	return { membership, invitation: row };
}

/**
 * Sends an invitation again, with a new link and a new term; the older link stops working.
 * @throws NotFoundError where it is answered or revoked, TooManyRequestsError
 */
export async function resendInvitation(
	given: Membership | null,
	id: string,
	db: Database = database()
): Promise<Sending> {
	const { membership, invitation } = await findManaged(db, given, id);
	const { email, roles, dossier } = invitation;
	await paceInvitations(membership, email, db);
	const token = newToken();
	const mail = await db.transaction(async (tx) => {
		const renewed = await tx
			.update(invitations)
			.set({
				tokenHash: hashToken(token),
				// Whoever sends it again vouches for it from now on.
				invitedBy: membership.userId,
				sentAt: sql`now()`,
				expiresAt: newExpiry
			})
			.where(and(eq(invitations.id, id), unanswered))
			.returning({ id: invitations.id });
		if (renewed.length === 0) throw new NotFoundError('invitation');
		await recordAudit(tx, membership, 'invitations.resend', id);
		const inviter = await inviterName(membership, tx);
		return invitationMail(
			{ email, inviter, organisation: membership.organisationName, roles, dossier },
			token
		);
	});
	return sendInvitation(email, mail);
}

/** Takes an invitation back; its link stops working at once. @returns the address that it went to */
export async function revokeInvitation(
	given: Membership | null,
	id: string,
	db: Database = database()
): Promise<{ email: string }> {
	const { membership, invitation } = await findManaged(db, given, id);
	await db.transaction(async (tx) => {
		const revoked = await tx
			.update(invitations)
			.set({ revokedAt: sql`now()` })
			.where(and(eq(invitations.id, id), unanswered))
			.returning({ id: invitations.id });
		if (revoked.length === 0) throw new NotFoundError('invitation');
		await recordAudit(tx, membership, 'invitations.revoke', id);
	});
	return { email: invitation.email };
}

/**
 * Takes back what somebody sent who may not send such invitations any more: an invitation stands for the one who
 * sent it.
 * @returns how many there were
 */
export async function revokeOpenOf(
	tx: Transaction,
	by: Pick<Membership, 'organisationId' | 'userId'>,
	inviterId: string,
	kind: 'member' | 'guest'
): Promise<number> {
	const revoked = await tx
		.update(invitations)
		.set({ revokedAt: sql`now()` })
		.where(
			and(
				eq(invitations.organisationId, by.organisationId),
				eq(invitations.invitedBy, inviterId),
				eq(invitations.kind, kind),
				unanswered
			)
		)
		.returning({ id: invitations.id });
	for (const { id } of revoked) await recordAudit(tx, by, 'invitations.revoke', id);
	return revoked.length;
}

/**
 * Drops invitations that ended ninety days ago: an address of somebody who did not come in is not kept for ever. Who
 * came in stands in the audit trail. A housekeeping job calls it.
 */
export async function dropOldInvitations(db: Database = database()): Promise<void> {
	await db
		.delete(invitations)
		.where(
			sql`coalesce(${invitations.acceptedAt}, ${invitations.revokedAt}, ${invitations.expiresAt}) < now() - interval '90 days'`
		);
}
