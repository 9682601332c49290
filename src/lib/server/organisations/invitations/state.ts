import { and, isNull, sql } from 'drizzle-orm';
import { dossiers, invitations } from '../../db/schema';

/** Days for which the link of an invitation works. */
export const invitationDays = 14;

export const invitationStates = ['open', 'expired', 'revoked', 'accepted'] as const;

export type InvitationState = (typeof invitationStates)[number];

/**
 * Where an invitation stands, told by the database's clock. That of a guest ends with its dossier: the query joins
 * `dossiers` to it from the left.
 */
export const invitationState = sql<InvitationState>`case
	when ${invitations.acceptedAt} is not null then 'accepted'
	when ${invitations.revokedAt} is not null then 'revoked'
	when ${invitations.kind} = 'guest' and (${dossiers.id} is null or ${dossiers.deletedAt} is not null) then 'revoked'
	when ${invitations.expiresAt} <= now() then 'expired'
	else 'open'
end`;

/** What a new sending sets: the end of the link's life. */
export const newExpiry = sql`now() + make_interval(days => ${invitationDays})`;

/** Neither accepted nor revoked; it may have expired. */
export const unanswered = and(isNull(invitations.acceptedAt), isNull(invitations.revokedAt));
