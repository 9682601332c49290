import { and, asc, eq } from 'drizzle-orm';
import { can } from '../../access/can';
import type { Membership, MemberRole } from '../../access/membership';
import { inReach } from '../../access/reach';
import { database, type Queryable } from '../../db';
import { dossiers, invitations, users } from '../../db/schema';
import { invitationState, unanswered } from './state';

export interface OpenInvitation {
	id: string;
	email: string;
	roles: MemberRole[];
	/** Null where that account is gone. */
	invitedBy: string | null;
	/** An expired one can be sent again. */
	state: 'open' | 'expired';
	expiresAt: Date;
}

/**
 * Invitations that wait for an answer, or waited too long; none for who may not manage them.
 * @param of those into the organisation, or those of one dossier's guests
 */
export async function listOpenInvitations(
	membership: Membership | null,
	of: { kind: 'member' } | { kind: 'guest'; dossierId: string },
	db: Queryable = database()
): Promise<OpenInvitation[]> {
	if (!can(membership, of.kind === 'member' ? 'members.manage' : 'guests.manage')) return [];
	if (membership === null) return [];
	const rows = await db
		.select({
			id: invitations.id,
			email: invitations.email,
			roles: invitations.roles,
			invitedBy: users.name,
			state: invitationState,
			expiresAt: invitations.expiresAt
		})
		.from(invitations)
		.leftJoin(users, eq(users.id, invitations.invitedBy))
		.leftJoin(dossiers, eq(dossiers.id, invitations.dossierId))
		.where(
			and(
				eq(invitations.organisationId, membership.organisationId),
				of.kind === 'member'
					? eq(invitations.kind, 'member')
					: and(eq(invitations.dossierId, of.dossierId), inReach(membership, invitations.dossierId)),
				unanswered
			)
		)
		.orderBy(asc(invitations.createdAt), asc(invitations.email));
	return rows.flatMap(({ state, ...row }) =>
		state === 'open' || state === 'expired' ? [{ ...row, state }] : []
	);
}
