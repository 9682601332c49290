import { and, count, eq, isNull, sql, type SQL } from 'drizzle-orm';
import type { Listed, ListQuery } from '$lib/lists/query';
import type { DossierColumn } from '$lib/lists/shapes';
import { requireAction } from '../access/can';
import type { Membership } from '../access/membership';
import { inReach } from '../access/reach';
import { database, type Queryable } from '../db';
import { calculations, dossiers, reports } from '../db/schema';
import { matching, ordered, paged } from '../lists/search';

export interface DossierRow {
	id: string;
	title: string;
	client: string;
	projectNumber: string;
	calculations: number;
	reports: number;
	updatedAt: Date;
}

const sortedBy: Record<DossierColumn, SQL> = {
	title: sql`lower(${dossiers.title})`,
	client: sql`lower(${dossiers.client})`,
	number: sql`lower(${dossiers.projectNumber})`,
	changed: sql`${dossiers.updatedAt}`
};

/** The organisation's dossiers: two queries, whatever the number of rows. */
export async function listDossiers(
	membership: Membership | null,
	query: ListQuery<DossierColumn>,
	db: Queryable = database()
): Promise<Listed<DossierRow>> {
	requireAction(membership, 'dossier.read');
	const own = and(
		eq(dossiers.organisationId, membership.organisationId),
		inReach(membership, dossiers.id),
		isNull(dossiers.deletedAt)
	);
	const found = matching(query.q, [
		dossiers.title,
		dossiers.client,
		dossiers.question,
		dossiers.projectNumber,
		dossiers.orderNumber
	]);
	const order = ordered(sortedBy[query.sort], query.order, dossiers.id);
	return paged(
		query,
		async () => {
			const [counted] = await db
				.select({
					total: count(),
					matching: sql<number>`count(*) filter (where ${found ?? sql`true`})`.mapWith(Number)
				})
				.from(dossiers)
				.where(own);
			return counted ?? { total: 0, matching: 0 };
		},
		(limit, offset) => {
			// The page is cut first: counting for every row before it would read the whole list's calculations.
			const page = db
				.select({
					id: dossiers.id,
					title: dossiers.title,
					client: dossiers.client,
					projectNumber: dossiers.projectNumber,
					updatedAt: dossiers.updatedAt,
					place: sql<number>`row_number() over (order by ${sql.join(order, sql`, `)})`.as('place')
				})
				.from(dossiers)
				.where(and(own, found))
				.orderBy(...order)
				.limit(limit)
				.offset(offset)
				.as('page');
			return db
				.select({
					id: page.id,
					title: page.title,
					client: page.client,
					projectNumber: page.projectNumber,
					calculations: db.$count(
						calculations,
						and(eq(calculations.dossierId, page.id), isNull(calculations.deletedAt))
					),
					reports: db.$count(reports, and(eq(reports.dossierId, page.id), isNull(reports.deletedAt))),
					updatedAt: page.updatedAt
				})
				.from(page)
				.orderBy(page.place);
		}
	);
}
