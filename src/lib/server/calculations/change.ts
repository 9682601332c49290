import { and, desc, eq, isNotNull, sql } from 'drizzle-orm';
import type { CalculationDraft, QuestionKind } from '$lib/calculation/draft';
import { draftSchema } from '$lib/calculation/draft-schema';
import { settleSources } from '$lib/calculation/form-fields';
import { newDraft } from '$lib/calculation/new-draft';
import { storable } from '$lib/calculation/storable';
import { methodById } from '$lib/methods';
import { recordAudit } from '../access/audit';
import { requireAction } from '../access/can';
import { ConflictError, InvalidInputError, NotFoundError } from '../access/errors';
import type { Membership } from '../access/membership';
import { inReach } from '../access/reach';
import { database, type Database, type Queryable } from '../db';
import { calculations, calculationVersions, evidence } from '../db/schema';
import { findDossier } from '../dossiers/find';
import { touchDossier } from '../dossiers/touch';
import { voidStaleApprovals } from '../reviews/approval';
import { getCalculation, getVersion } from './load';

/** Saves of one person within this time are one version: typing a number is not twenty versions. */
const oneVersionSeconds = 120;

/**
 * A new calculation in a dossier, as an empty form.
 * @returns its id
 * @throws NotFoundError where the dossier is not the organisation's, or deleted.
 */
export async function createCalculation(
	membership: Membership | null,
	dossierId: string,
	given: { title: string; kind: QuestionKind },
	db: Database = database()
): Promise<string> {
	requireAction(membership, 'calculation.write');
	const title = storable(given.title).trim();
	if (title === '')
		throw new InvalidInputError('Give it a title.', { title: 'Title: give it a name that you find again.' });
	if (title.length > 200) {
		throw new InvalidInputError('The title is too long.', { title: 'Title: at most 200 characters.' });
	}
	return insert(membership, dossierId, title, newDraft(given.kind), db);
}

async function insert(
	membership: Membership,
	dossierId: string,
	title: string,
	draft: CalculationDraft,
	db: Database
): Promise<string> {
	return db.transaction(async (tx) => {
		await findDossier(tx, membership, dossierId);
		const [row] = await tx
			.insert(calculations)
			.values({
				organisationId: membership.organisationId,
				dossierId,
				title,
				draft,
				createdBy: membership.userId
			})
			.returning({ id: calculations.id });
		if (row === undefined) throw new Error('The calculation was not stored.');
		await tx
			.insert(calculationVersions)
			.values({ calculationId: row.id, version: 1, draft, savedBy: membership.userId });
		await touchDossier(tx, membership, dossierId);
		await recordAudit(tx, membership, 'calculation.create', row.id);
		return row.id;
	});
}

/** Evidence that a draft names must lie in the same dossier; a foreign id is refused as if it were not there. */
async function checkEvidence(
	draft: CalculationDraft,
	dossierId: string,
	membership: Membership,
	db: Queryable
) {
	const named = Object.values(draft.assumptions).flatMap(({ source }) => source.evidenceId ?? []);
	for (const id of new Set(named)) {
		const [row] = await db
			.select({ id: evidence.id })
			.from(evidence)
			.where(
				and(
					eq(evidence.id, id),
					eq(evidence.dossierId, dossierId),
					eq(evidence.organisationId, membership.organisationId),
					inReach(membership, evidence.dossierId)
				)
			);
		if (row === undefined) throw new NotFoundError('evidence file');
	}
}

/**
 * Saves a draft as a version.
 * @param given.baseVersion the version that the change started from
 * @param given.ownVersion never one with the save before, even within the time that counts as one version
 * @returns the new version's number; the former one where nothing changed
 * @throws ConflictError where somebody, or another tab, has saved since.
 */
export async function saveDraft(
	membership: Membership | null,
	id: string,
	given: { draft: unknown; baseVersion: number; title?: string; ownVersion?: boolean },
	db: Database = database()
): Promise<number> {
	requireAction(membership, 'calculation.write');
	const parsed = draftSchema.safeParse(given.draft);
	if (!parsed.success) {
		throw new InvalidInputError('What was sent is not a calculation; reload the page and try again.');
	}
	const method = methodById(parsed.data.method ?? '');
	const draft = method === undefined ? parsed.data : settleSources(parsed.data, method);
	return db.transaction(async (tx) => {
		const before = await getCalculation(membership, id, tx);
		const [locked] = await tx
			.select({ version: calculations.version, draft: calculations.draft, title: calculations.title })
			.from(calculations)
			.where(eq(calculations.id, id))
			.for('update');
		if (locked === undefined) throw new NotFoundError('calculation');
		const title =
			storable(given.title ?? '')
				.trim()
				.slice(0, 200) || locked.title;
		const [same] = (
			await tx.execute<{ same: boolean }>(
				sql`select ${JSON.stringify(draft)}::jsonb = ${JSON.stringify(locked.draft)}::jsonb as same`
			)
		).rows;
		if (same?.same === true && title === locked.title) return locked.version;
		if (locked.version !== given.baseVersion) {
			throw new ConflictError(
				'This calculation was saved elsewhere since you opened it. Reload to see the newer version; what you typed here is not lost until you do.'
			);
		}
		await checkEvidence(draft, before.dossier.id, membership, tx);
		const version = locked.version + 1;
		await tx
			.update(calculations)
			.set({ draft, title, version, updatedAt: sql`now()` })
			.where(eq(calculations.id, id));
		await keepVersion(id, { version, draft, ownVersion: given.ownVersion === true }, membership.userId, tx);
		await touchDossier(tx, membership, before.dossier.id);
		if (title !== locked.title) {
			// A report prints the title; what it prints of the rest stands in its runs, which never change.
			const { id: dossierId } = before.dossier;
			await voidStaleApprovals(tx, membership, { dossierId }, 'A calculation was renamed');
		}
		return version;
	});
}

async function keepVersion(
	id: string,
	{ version, draft, ownVersion }: { version: number; draft: CalculationDraft; ownVersion: boolean },
	userId: string,
	db: Queryable
) {
	const [newest] = await db
		.select({
			id: calculationVersions.id,
			savedBy: calculationVersions.savedBy,
			version: calculationVersions.version,
			recent: sql<boolean>`${calculationVersions.savedAt} > now() - make_interval(secs => ${oneVersionSeconds})`
		})
		.from(calculationVersions)
		.where(eq(calculationVersions.calculationId, id))
		.orderBy(desc(calculationVersions.version))
		.limit(1);
	const continued = newest !== undefined && newest.recent && newest.savedBy === userId && newest.version > 1;
	if (continued && !ownVersion) {
		await db.update(calculationVersions).set({ version, draft }).where(eq(calculationVersions.id, newest.id));
		return;
	}
	await db.insert(calculationVersions).values({ calculationId: id, version, draft, savedBy: userId });
}

/** Brings an earlier version back as the newest one; nothing in between is lost. */
export async function restoreVersion(
	membership: Membership | null,
	id: string,
	version: number,
	db: Database = database()
): Promise<void> {
	requireAction(membership, 'calculation.write');
	const draft = await getVersion(membership, id, version, db);
	const { version: baseVersion } = await getCalculation(membership, id, db);
	await saveDraft(membership, id, { draft, baseVersion, ownVersion: true }, db);
	await recordAudit(db, membership, 'calculation.restore-version', id, { version });
}

/** A copy in the same dossier. @returns the copy's id */
export async function duplicateCalculation(
	membership: Membership | null,
	id: string,
	db: Database = database()
): Promise<string> {
	requireAction(membership, 'calculation.write');
	const source = await getCalculation(membership, id, db);
	return insert(membership, source.dossier.id, `${source.title.slice(0, 190)} (copy)`, source.draft, db);
}

/** Puts a calculation away; `restoreCalculation` brings it back within thirty days. @returns its title */
export async function deleteCalculation(
	membership: Membership | null,
	id: string,
	db: Database = database()
): Promise<{ title: string; dossierId: string }> {
	requireAction(membership, 'calculation.write');
	const { title, dossier } = await getCalculation(membership, id, db);
	await db.transaction(async (tx) => {
		await tx
			.update(calculations)
			.set({ deletedAt: sql`now()` })
			.where(eq(calculations.id, id));
		await recordAudit(tx, membership, 'calculation.delete', id);
	});
	return { title, dossierId: dossier.id };
}

/** Undoes a deletion. */
export async function restoreCalculation(
	membership: Membership | null,
	id: string,
	db: Database = database()
): Promise<void> {
	requireAction(membership, 'calculation.write');
	const restored = await db
		.update(calculations)
		.set({ deletedAt: null })
		.where(
			and(
				eq(calculations.id, id),
				eq(calculations.organisationId, membership.organisationId),
				inReach(membership, calculations.dossierId),
				isNotNull(calculations.deletedAt)
			)
		)
		.returning({ id: calculations.id });
	if (restored.length === 0) throw new NotFoundError('calculation');
	await recordAudit(db, membership, 'calculation.restore', id);
}

/** Title of a calculation that was put away, for the notice that offers to bring it back; undefined for any other. */
export async function deletedCalculationTitle(
	membership: Membership | null,
	id: string,
	db: Queryable = database()
): Promise<string | undefined> {
	requireAction(membership, 'calculation.read');
	const [row] = await db
		.select({ title: calculations.title })
		.from(calculations)
		.where(
			and(
				eq(calculations.id, id),
				eq(calculations.organisationId, membership.organisationId),
				inReach(membership, calculations.dossierId),
				isNotNull(calculations.deletedAt)
			)
		);
	return row?.title;
}
