import { and, eq, sql } from 'drizzle-orm';
import type { Membership } from '../access/membership';
import { inReach } from '../access/reach';
import type { Queryable } from '../db';
import { dossiers } from '../db/schema';

/** Work on anything in a dossier moves the dossier up: call it where a calculation, report or file changes. */
export async function touchDossier(db: Queryable, membership: Membership, id: string): Promise<void> {
	await db
		.update(dossiers)
		.set({ updatedAt: sql`now()` })
		.where(
			and(
				eq(dossiers.id, id),
				eq(dossiers.organisationId, membership.organisationId),
				inReach(membership, dossiers.id)
			)
		);
}
