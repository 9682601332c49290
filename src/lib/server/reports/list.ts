import { and, count, eq, isNull, sql, type SQL } from 'drizzle-orm';
import type { Listed, ListQuery } from '$lib/lists/query';
import type { ReportColumn } from '$lib/lists/shapes';
import type { RunOutcome } from '$lib/wording/answer-in-brief';
import { requireAction } from '../access/can';
import type { Membership } from '../access/membership';
import { inReach } from '../access/reach';
import { outcomeOfRun } from '../calculations/list';
import { database, type Queryable } from '../db';
import { dossiers, reports, runs, users } from '../db/schema';
import { matching, ordered, paged } from '../lists/search';

type ReportState = (typeof reports.$inferSelect)['state'];

export interface ReportRow {
	id: string;
	number: string;
	revision: number;
	title: string;
	dossierId: string;
	dossierTitle: string;
	addressee: string;
	state: ReportState;
	/** Who wrote this revision; null where that account is gone. */
	author: string | null;
	/** The first run that it reports; null while it reports none. */
	outcome: RunOutcome | null;
	updatedAt: Date;
}

const sortedBy: Record<ReportColumn, SQL> = {
	// Numbers end in four digits after the prefix; longer ones come after shorter ones.
	number: sql`(lpad(${reports.number}, 40), ${reports.revision})`,
	title: sql`lower(${reports.title})`,
	addressee: sql`lower(${dossiers.client})`,
	// The order of document control, not of the alphabet.
	state: sql`array_position(array['draft', 'in-review', 'returned', 'approved', 'issued', 'superseded', 'withdrawn'], ${reports.state})`,
	revised: sql`${reports.updatedAt}`
};

/** @param dossierId narrows the list to one dossier. */
export async function listReports(
	membership: Membership | null,
	query: ListQuery<ReportColumn>,
	dossierId?: string,
	db: Queryable = database()
): Promise<Listed<ReportRow>> {
	requireAction(membership, 'report.read');
	const own = and(
		eq(reports.organisationId, membership.organisationId),
		inReach(membership, reports.dossierId),
		isNull(reports.deletedAt),
		isNull(dossiers.deletedAt),
		dossierId === undefined ? undefined : eq(reports.dossierId, dossierId)
	);
	const found = and(
		matching(query.q, [reports.number, reports.title, dossiers.client, dossiers.title]),
		query.state === '' ? undefined : eq(reports.state, query.state as ReportState)
	);
	return paged(
		query,
		async () => {
			const [counted] = await db
				.select({
					total: count(),
					matching: sql<number>`count(*) filter (where ${found ?? sql`true`})`.mapWith(Number)
				})
				.from(reports)
				.innerJoin(dossiers, eq(dossiers.id, reports.dossierId))
				.where(own);
			return counted ?? { total: 0, matching: 0 };
		},
		(limit, offset) =>
			db
				.select({
					id: reports.id,
					number: reports.number,
					revision: reports.revision,
					title: reports.title,
					dossierId: dossiers.id,
					dossierTitle: dossiers.title,
					addressee: dossiers.client,
					state: reports.state,
					author: users.name,
					outcome: sql<RunOutcome | null>`case when ${runs.result} is null then null else ${outcomeOfRun} end`,
					updatedAt: reports.updatedAt
				})
				.from(reports)
				.innerJoin(dossiers, eq(dossiers.id, reports.dossierId))
				.leftJoin(users, eq(users.id, reports.createdBy))
				.leftJoin(
					runs,
					and(sql`${runs.id} = ${reports.runIds}[1]`, eq(runs.organisationId, reports.organisationId))
				)
				.where(and(own, found))
				.orderBy(...ordered(sortedBy[query.sort], query.order, reports.id))
				.limit(limit)
				.offset(offset)
	);
}
