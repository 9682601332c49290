import { and, eq, inArray, isNull, sql } from 'drizzle-orm';
import type { ReportText } from '$lib/report/text';
import { requireAction, type Action } from '../access/can';
import { NotFoundError } from '../access/errors';
import type { Membership } from '../access/membership';
import { inReach } from '../access/reach';
import { database, type Queryable } from '../db';
import { calculations, dossiers, reports, runs } from '../db/schema';

export type ReportState = (typeof reports.$inferSelect)['state'];

export interface ReportView {
	id: string;
	number: string;
	revision: number;
	template: string;
	title: string;
	text: ReportText;
	runIds: string[];
	state: ReportState;
	version: number;
	createdBy: string | null;
	updatedAt: Date;
	dossier: typeof dossiers.$inferSelect;
}

/** One report of the member's organisation. @throws NotFoundError for a foreign, deleted or unknown one alike. */
export async function getReport(
	membership: Membership | null,
	id: string,
	db: Queryable = database()
): Promise<ReportView> {
	requireAction(membership, 'report.read');
	const [row] = await db
		.select({ report: reports, dossier: dossiers })
		.from(reports)
		.innerJoin(dossiers, eq(dossiers.id, reports.dossierId))
		.where(
			and(
				eq(reports.id, id),
				eq(reports.organisationId, membership.organisationId),
				inReach(membership, reports.dossierId),
				isNull(reports.deletedAt),
				isNull(dossiers.deletedAt)
			)
		);
	if (row === undefined) throw new NotFoundError('report');
	const { id: reportId, number, revision, template, title, text, runIds, state, version } = row.report;
	const { createdBy, updatedAt } = row.report;
	return {
		id: reportId,
		number,
		revision,
		template,
		title,
		text,
		runIds,
		state,
		version,
		createdBy,
		updatedAt,
		dossier: row.dossier
	};
}

/**
 * The report, for a page with a form that does something with it: whoever sees the report but may not do that is told
 * so before they fill it in.
 */
export async function getReportTo(
	action: Action,
	membership: Membership | null,
	id: string,
	db: Queryable = database()
): Promise<ReportView> {
	const report = await getReport(membership, id, db);
	requireAction(membership, action);
	return report;
}

export interface RunChoice {
	id: string;
	calculationId: string;
	title: string;
	/** Id of the method. */
	method: string;
	finishedAt: Date | null;
	/** False where the calculation was computed anew since. */
	newest: boolean;
}

/** Finished runs of a dossier that a report may show: the newest of each calculation, and those already chosen. */
export async function runChoices(
	membership: Membership | null,
	dossierId: string,
	chosen: readonly string[],
	db: Queryable = database()
): Promise<RunChoice[]> {
	requireAction(membership, 'report.read');
	const rows = await db
		.select({
			id: runs.id,
			calculationId: runs.calculationId,
			title: calculations.title,
			method: sql<string>`${runs.request} ->> 'method'`,
			finishedAt: runs.finishedAt,
			deletedAt: calculations.deletedAt
		})
		.from(runs)
		.innerJoin(calculations, eq(calculations.id, runs.calculationId))
		.where(
			and(
				eq(calculations.dossierId, dossierId),
				eq(runs.organisationId, membership.organisationId),
				inReach(membership, calculations.dossierId),
				eq(runs.state, 'done')
			)
		)
		.orderBy(calculations.title, runs.createdAt);
	const newest = new Map(rows.map((row) => [row.calculationId, row.id]));
	return rows
		.filter(
			(row) => chosen.includes(row.id) || (newest.get(row.calculationId) === row.id && row.deletedAt === null)
		)
		.map(({ deletedAt: _, ...row }) => ({ ...row, newest: newest.get(row.calculationId) === row.id }));
}

/** The runs of a report in its order. @throws NotFoundError where one is not the organisation's or has no result. */
export async function runsOf(
	membership: Membership,
	runIds: readonly string[],
	dossierId: string,
	db: Queryable
): Promise<{ run: typeof runs.$inferSelect; title: string }[]> {
	if (runIds.length === 0) return [];
	const rows = await db
		.select({ run: runs, title: calculations.title })
		.from(runs)
		.innerJoin(calculations, eq(calculations.id, runs.calculationId))
		.where(
			and(
				inArray(runs.id, [...runIds]),
				eq(runs.organisationId, membership.organisationId),
				inReach(membership, calculations.dossierId),
				eq(calculations.dossierId, dossierId),
				eq(runs.state, 'done')
			)
		);
	return runIds.map((id) => {
		const found = rows.find(({ run }) => run.id === id);
		if (found === undefined) throw new NotFoundError('run');
		return found;
	});
}
