import type { Queryable } from '../db';
import { auditEvents } from '../db/schema';
import type { Membership } from './membership';

/** What an event may carry beside its subject: ids, counts and names of fields; no secret and no document's text. */
export type AuditDetail = Readonly<Record<string, string | number | boolean | readonly string[] | null>>;

/**
 * Notes who did what. Give it the transaction of the change itself, so that neither stands without the other.
 * @param action what was done, as `thing.verb`: "dossier.create"
 * @param subject id of the thing, or null where the action has none
 */
export async function recordAudit(
	db: Queryable,
	membership: Pick<Membership, 'organisationId' | 'userId'>,
	action: string,
	subject: string | null,
	detail?: AuditDetail
): Promise<void> {
	await db.insert(auditEvents).values({
		organisationId: membership.organisationId,
		userId: membership.userId,
		action,
		subject,
		detail: detail ?? null
	});
}
