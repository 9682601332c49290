import { and, eq, isNull, sql } from 'drizzle-orm';
import { dossierInput, type DossierField, type DossierInput } from '$lib/schemas/dossier';
import { recordAudit } from '../access/audit';
import { requireAction } from '../access/can';
import { ConflictError } from '../access/errors';
import type { Membership } from '../access/membership';
import { inReach } from '../access/reach';
import { database, type Database } from '../db';
import { dossiers } from '../db/schema';
import { voidStaleApprovals } from '../reviews/approval';
import { findDossier } from './find';

/**
 * Saves a dossier's fields.
 * @param startedFrom `version` that the form was filled from
 * @throws ConflictError where somebody saved in between; nothing is written then.
 */
export async function updateDossier(
	membership: Membership | null,
	id: string,
	input: DossierInput,
	startedFrom: number,
	db: Database = database()
): Promise<void> {
	requireAction(membership, 'dossier.write');
	const fields = dossierInput.parse(input);
	await db.transaction(async (tx) => {
		const before = await findDossier(tx, membership, id);
		const saved = await tx
			.update(dossiers)
			.set({ ...fields, version: sql`${dossiers.version} + 1`, updatedAt: sql`now()` })
			.where(
				and(
					eq(dossiers.id, id),
					eq(dossiers.organisationId, membership.organisationId),
					inReach(membership, dossiers.id),
					eq(dossiers.version, startedFrom),
					isNull(dossiers.deletedAt)
				)
			)
			.returning({ id: dossiers.id });
		if (saved.length === 0) {
			throw new ConflictError(
				'Somebody else saved this dossier while you were writing. What you typed is below; compare it with the saved text and save again.'
			);
		}
		const names = Object.keys(fields) as DossierField[];
		await recordAudit(tx, membership, 'dossier.update', id, {
			fields: names.filter((name) => fields[name] !== before[name])
		});
		await voidStaleApprovals(tx, membership, { dossierId: id }, 'The dossier was changed');
	});
}
