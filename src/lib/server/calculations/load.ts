import { and, desc, eq, isNull } from 'drizzle-orm';
import type { CalculationDraft } from '$lib/calculation/draft';
import { requireAction } from '../access/can';
import { NotFoundError } from '../access/errors';
import type { Membership } from '../access/membership';
import { inReach } from '../access/reach';
import { database, type Queryable } from '../db';
import { calculations, calculationVersions, dossiers, users } from '../db/schema';

export interface CalculationView {
	id: string;
	title: string;
	dossier: { id: string; title: string; question: string };
	draft: CalculationDraft;
	version: number;
	updatedAt: Date;
}

/**
 * One calculation of the member's organisation.
 * @throws NotFoundError where it does not exist, was deleted, or belongs to somebody else.
 */
export async function getCalculation(
	membership: Membership | null,
	id: string,
	db: Queryable = database()
): Promise<CalculationView> {
	requireAction(membership, 'calculation.read');
	const [row] = await db
		.select({
			id: calculations.id,
			title: calculations.title,
			draft: calculations.draft,
			version: calculations.version,
			updatedAt: calculations.updatedAt,
			dossierId: dossiers.id,
			dossierTitle: dossiers.title,
			question: dossiers.question
		})
		.from(calculations)
		.innerJoin(dossiers, eq(dossiers.id, calculations.dossierId))
		.where(
			and(
				eq(calculations.id, id),
				eq(calculations.organisationId, membership.organisationId),
				inReach(membership, calculations.dossierId),
				isNull(calculations.deletedAt),
				isNull(dossiers.deletedAt)
			)
		);
	if (row === undefined) throw new NotFoundError('calculation');
	const { dossierId, dossierTitle, question, ...calculation } = row;
	return { ...calculation, dossier: { id: dossierId, title: dossierTitle, question } };
}

export interface VersionView {
	version: number;
	savedAt: Date;
	savedBy: string | null;
}

/** The saves of a calculation, newest first. */
export async function listVersions(
	membership: Membership | null,
	id: string,
	db: Queryable = database()
): Promise<VersionView[]> {
	await getCalculation(membership, id, db);
	return db
		.select({
			version: calculationVersions.version,
			savedAt: calculationVersions.savedAt,
			savedBy: users.name
		})
		.from(calculationVersions)
		.leftJoin(users, eq(users.id, calculationVersions.savedBy))
		.where(eq(calculationVersions.calculationId, id))
		.orderBy(desc(calculationVersions.version))
		.limit(100);
}

/** One saved version's draft. */
export async function getVersion(
	membership: Membership | null,
	id: string,
	version: number,
	db: Queryable = database()
): Promise<CalculationDraft> {
	await getCalculation(membership, id, db);
	const [row] = await db
		.select({ draft: calculationVersions.draft })
		.from(calculationVersions)
		.where(and(eq(calculationVersions.calculationId, id), eq(calculationVersions.version, version)));
	if (row === undefined) throw new NotFoundError('version');
	return row.draft;
}
