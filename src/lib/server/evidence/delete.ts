import { and, eq, exists, isNotNull, isNull, or, sql } from 'drizzle-orm';
import { recordAudit } from '../access/audit';
import { requireAction } from '../access/can';
import { ConflictError, NotFoundError } from '../access/errors';
import type { Membership } from '../access/membership';
import { inReach } from '../access/reach';
import { database, type Database, type Queryable } from '../db';
import { calculations, evidence, reports, runs } from '../db/schema';
import { findDossier } from '../dossiers/find';
import { touchDossier } from '../dossiers/touch';
import { containing } from '../lists/search';

/** Title of a calculation that cites the file, in its assumptions now or in a run that a report states. */
async function citedBy(db: Queryable, membership: Membership, dossierId: string, id: string) {
	const [row] = await db
		.select({ title: calculations.title })
		.from(calculations)
		.where(
			and(
				eq(calculations.organisationId, membership.organisationId),
				inReach(membership, calculations.dossierId),
				eq(calculations.dossierId, dossierId),
				or(
					and(isNull(calculations.deletedAt), sql`${calculations.draft}::text like ${containing(id)}`),
					exists(
						db
							.select({ one: sql`1` })
							.from(runs)
							.innerJoin(
								reports,
								and(eq(reports.dossierId, calculations.dossierId), sql`${runs.id} = any(${reports.runIds})`)
							)
							.where(
								and(eq(runs.calculationId, calculations.id), sql`${runs.draft}::text like ${containing(id)}`)
							)
					)
				)
			)
		)
		.limit(1);
	return row?.title;
}

/**
 * Takes a file out of its dossier; `restoreEvidence` brings it back.
 * @returns the dossier's id.
 * @throws ConflictError where a calculation cites it.
 */
export async function deleteEvidence(
	membership: Membership | null,
	id: string,
	db: Database = database()
): Promise<string> {
	requireAction(membership, 'evidence.write');
	return db.transaction(async (tx) => {
		const [file] = await tx
			.select({ dossierId: evidence.dossierId })
			.from(evidence)
			.where(
				and(
					eq(evidence.id, id),
					eq(evidence.organisationId, membership.organisationId),
					inReach(membership, evidence.dossierId),
					isNull(evidence.deletedAt)
				)
			)
			.for('update');
		if (file === undefined) throw new NotFoundError('file');
		await findDossier(tx, membership, file.dossierId);
		const title = await citedBy(tx, membership, file.dossierId, id);
		if (title !== undefined) {
			throw new ConflictError(
				`The calculation “${title}” rests on this file. Give its assumption another source first; a file that a report states stays.`
			);
		}
		await tx
			.update(evidence)
			.set({ deletedAt: sql`now()` })
			.where(eq(evidence.id, id));
		await touchDossier(tx, membership, file.dossierId);
		await recordAudit(tx, membership, 'evidence.delete', id, { dossier: file.dossierId });
		return file.dossierId;
	});
}

/** Undoes a deletion. @returns the dossier's id. @throws NotFoundError where there is no such deleted file. */
export async function restoreEvidence(
	membership: Membership | null,
	id: string,
	db: Database = database()
): Promise<string> {
	requireAction(membership, 'evidence.write');
	return db.transaction(async (tx) => {
		const [back] = await tx
			.update(evidence)
			.set({ deletedAt: null })
			.where(
				and(
					eq(evidence.id, id),
					eq(evidence.organisationId, membership.organisationId),
					inReach(membership, evidence.dossierId),
					isNotNull(evidence.deletedAt)
				)
			)
			.returning({ dossierId: evidence.dossierId });
		if (back === undefined) throw new NotFoundError('file');
		await findDossier(tx, membership, back.dossierId);
		await touchDossier(tx, membership, back.dossierId);
		await recordAudit(tx, membership, 'evidence.restore', id, { dossier: back.dossierId });
		return back.dossierId;
	});
}

/** Name of a file that was just deleted, for the notice that offers to undo it; undefined for any other. */
export async function deletedEvidenceName(
	membership: Membership | null,
	id: string,
	db: Queryable = database()
): Promise<string | undefined> {
	requireAction(membership, 'dossier.read');
	const [row] = await db
		.select({ fileName: evidence.fileName })
		.from(evidence)
		.where(
			and(
				eq(evidence.id, id),
				eq(evidence.organisationId, membership.organisationId),
				inReach(membership, evidence.dossierId),
				isNotNull(evidence.deletedAt)
			)
		);
	return row?.fileName;
}
