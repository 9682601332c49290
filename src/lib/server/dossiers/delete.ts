import { and, eq, inArray, isNotNull, isNull, notExists, sql } from 'drizzle-orm';
import { recordAudit } from '../access/audit';
import { requireAction } from '../access/can';
import { ConflictError, NotFoundError } from '../access/errors';
import type { Membership } from '../access/membership';
import { inReach } from '../access/reach';
import { database, type Database, type Queryable } from '../db';
import { dossiers, issues, reports } from '../db/schema';
import { findDossier } from './find';

/** Reports of the dossier that were issued, or whose issue has been asked for: they are kept for ever. */
function keptReports(db: Queryable, membership: Membership, dossierId: string) {
	return db
		.select({ number: reports.number })
		.from(reports)
		.leftJoin(issues, eq(issues.reportId, reports.id))
		.where(
			and(
				eq(reports.organisationId, membership.organisationId),
				inReach(membership, reports.dossierId),
				eq(reports.dossierId, dossierId),
				sql`(${inArray(reports.state, ['issued', 'superseded', 'withdrawn'])} or ${issues.state} <> 'failed')`
			)
		)
		.limit(1);
}

/**
 * Takes a dossier, with all that is in it, out of sight. `restoreDossier` brings it back.
 * @throws ConflictError where a report in it was issued.
 */
export async function deleteDossier(
	membership: Membership | null,
	id: string,
	db: Database = database()
): Promise<void> {
	requireAction(membership, 'dossier.write');
	await db.transaction(async (tx) => {
		await findDossier(tx, membership, id);
		const gone = await tx
			.update(dossiers)
			.set({ deletedAt: sql`now()` })
			.where(
				and(
					eq(dossiers.id, id),
					eq(dossiers.organisationId, membership.organisationId),
					inReach(membership, dossiers.id),
					isNull(dossiers.deletedAt),
					notExists(keptReports(tx, membership, id))
				)
			)
			.returning({ id: dossiers.id });
		if (gone.length === 0) {
			throw new ConflictError(
				'A report in this dossier was issued and must stay readable: it cannot be deleted.'
			);
		}
		await recordAudit(tx, membership, 'dossier.delete', id);
	});
}

/** Undoes a deletion. @throws NotFoundError where there is no deleted dossier of that id. */
export async function restoreDossier(
	membership: Membership | null,
	id: string,
	db: Database = database()
): Promise<void> {
	requireAction(membership, 'dossier.write');
	await db.transaction(async (tx) => {
		const back = await tx
			.update(dossiers)
			.set({ deletedAt: null, updatedAt: sql`now()` })
			.where(
				and(
					eq(dossiers.id, id),
					eq(dossiers.organisationId, membership.organisationId),
					inReach(membership, dossiers.id),
					isNotNull(dossiers.deletedAt)
				)
			)
			.returning({ id: dossiers.id });
		if (back.length === 0) throw new NotFoundError('dossier');
		await recordAudit(tx, membership, 'dossier.restore', id);
	});
}

/** Title of a dossier that was just deleted, for the notice that offers to undo it; undefined for any other. */
export async function deletedDossierTitle(
	membership: Membership | null,
	id: string,
	db: Queryable = database()
): Promise<string | undefined> {
	requireAction(membership, 'dossier.read');
	const [row] = await db
		.select({ title: dossiers.title })
		.from(dossiers)
		.where(
			and(
				eq(dossiers.id, id),
				eq(dossiers.organisationId, membership.organisationId),
				inReach(membership, dossiers.id),
				isNotNull(dossiers.deletedAt)
			)
		);
	return row?.title;
}
