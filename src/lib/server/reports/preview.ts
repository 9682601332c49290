import { and, desc, eq, lt, sql } from 'drizzle-orm';
import { requireAction } from '../access/can';
import { NotFoundError } from '../access/errors';
import { limit } from '../access/limit';
import type { Membership } from '../access/membership';
import { inReach } from '../access/reach';
import { database, type Database, type Queryable } from '../db';
import { previews, reports } from '../db/schema';
import { enqueue } from '../jobs/queue';
import { presentReview } from '../reviews/approval';
import { getReport } from './load';
import { modelOf, requirePrintable, unissued } from './model';

export interface PreviewView {
	id: string;
	state: 'queued' | 'rendering' | 'done' | 'failed';
	problem: string | null;
}

/**
 * Asks for a watermarked, unsigned rendering of a report as it stands. The same version asked for twice is one.
 * @throws InvalidInputError where it reports no result.
 */
export async function requestPreview(
	membership: Membership | null,
	reportId: string,
	db: Database = database()
): Promise<string> {
	requireAction(membership, 'report.read');
	await limit(`report-preview:${membership.userId}`, 60, 60, db);
	const report = await getReport(membership, reportId, db);
	const model = await modelOf(
		membership,
		report,
		{ ...unissued, state: report.state, review: await presentReview(report, db) },
		db
	);
	requirePrintable(model);
	return db.transaction(async (tx) => {
		const [same] = await tx
			.select({ id: previews.id })
			.from(previews)
			.where(
				and(
					eq(previews.reportId, report.id),
					eq(previews.version, report.version),
					sql`${previews.state} <> 'failed'`,
					// The organisation's letterhead or the dossier may have changed although the report did not.
					sql`${previews.model} = ${JSON.stringify(model)}::jsonb`
				)
			)
			.orderBy(desc(previews.requestedAt))
			.limit(1);
		if (same !== undefined) return same.id;
		await tx
			.delete(previews)
			.where(and(eq(previews.reportId, report.id), lt(previews.requestedAt, sql`now() - interval '1 day'`)));
		const [row] = await tx
			.insert(previews)
			.values({
				organisationId: membership.organisationId,
				reportId: report.id,
				version: report.version,
				model
			})
			.returning({ id: previews.id });
		if (row === undefined) throw new Error('The preview was not stored.');
		await enqueue(tx, 'render-preview', { previewId: row.id }, { organisationId: membership.organisationId });
		return row.id;
	});
}

/** Where a preview stands. */
export async function getPreview(
	membership: Membership | null,
	id: string,
	db: Queryable = database()
): Promise<PreviewView> {
	requireAction(membership, 'report.read');
	const [row] = await db
		.select({ id: previews.id, state: previews.state, problem: previews.problem })
		.from(previews)
		.innerJoin(reports, eq(reports.id, previews.reportId))
		.where(
			and(
				eq(previews.id, id),
				eq(previews.organisationId, membership.organisationId),
				inReach(membership, reports.dossierId)
			)
		);
	if (row === undefined) throw new NotFoundError('preview');
	return row;
}

/** The bytes of a finished preview. */
export async function previewFile(
	membership: Membership | null,
	id: string,
	db: Queryable = database()
): Promise<Buffer> {
	requireAction(membership, 'report.read');
	const [row] = await db
		.select({ pdf: previews.pdf })
		.from(previews)
		.innerJoin(reports, eq(reports.id, previews.reportId))
		.where(
			and(
				eq(previews.id, id),
				eq(previews.organisationId, membership.organisationId),
				inReach(membership, reports.dossierId)
			)
		);
	if (!row?.pdf) throw new NotFoundError('preview');
	return row.pdf;
}
