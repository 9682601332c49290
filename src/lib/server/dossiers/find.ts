import { and, eq, isNull } from 'drizzle-orm';
import { NotFoundError } from '../access/errors';
import type { Membership } from '../access/membership';
import { inReach } from '../access/reach';
import type { Queryable } from '../db';
import { dossiers } from '../db/schema';

export type Dossier = typeof dossiers.$inferSelect;

/**
 * A dossier of the member's organisation that is not deleted. Checks no action: call `requireAction` first.
 * @throws NotFoundError for a foreign, deleted or unknown one alike.
 */
export async function findDossier(db: Queryable, membership: Membership, id: string): Promise<Dossier> {
	const [found] = await db
		.select()
		.from(dossiers)
		.where(
			and(
				eq(dossiers.id, id),
				eq(dossiers.organisationId, membership.organisationId),
				inReach(membership, dossiers.id),
				isNull(dossiers.deletedAt)
			)
		);
	if (found === undefined) throw new NotFoundError('dossier');
	return found;
}
