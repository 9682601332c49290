import { and, count, desc, eq, isNull, sql, type SQL } from 'drizzle-orm';
import type { QuestionKind } from '$lib/calculation/draft';
import type { Listed, ListQuery } from '$lib/lists/query';
import type { CalculationColumn } from '$lib/lists/shapes';
import { methods } from '$lib/methods';
import type { RunOutcome } from '$lib/wording/answer-in-brief';
import { requireAction } from '../access/can';
import type { Membership } from '../access/membership';
import { inReach } from '../access/reach';
import { database, type Queryable } from '../db';
import { calculations, dossiers, runs } from '../db/schema';
import { matching, ordered, paged } from '../lists/search';

export interface CalculationRow {
	id: string;
	title: string;
	dossierId: string;
	dossierTitle: string;
	kind: QuestionKind;
	/** Method id; null while none is chosen. */
	method: string | null;
	/** The latest run that came to an end well; null before that. */
	outcome: RunOutcome | null;
	updatedAt: Date;
}

const method = sql<string | null>`${calculations.draft} ->> 'method'`;

/** What the list shows is what is searched and sorted by: the method's title, not its id. */
const methodTitle = sql`case ${method} ${sql.join(
	methods.map(({ id, title }) => sql`when ${id} then ${title}`),
	sql` `
)} else coalesce(${method}, '') end`;

const sortedBy: Record<CalculationColumn, SQL> = {
	title: sql`lower(${calculations.title})`,
	dossier: sql`lower(${dossiers.title})`,
	method: sql`lower(${methodTitle})`,
	changed: sql`${calculations.updatedAt}`
};

/** The parts of a stored result that a list needs; its series stay in the database. */
export const outcomeOfRun = sql<RunOutcome>`jsonb_build_object(
	'method', ${runs.result} -> 'method' ->> 'id',
	'outputs', ${runs.result} -> 'outputs',
	'compared', case ${runs.draft} ->> 'kind'
		when 'check-claim' then ${runs.draft} -> 'claim' ->> 'output'
		when 'test-limit' then ${runs.draft} -> 'limit' ->> 'output'
	end,
	'scale', ${runs.draft} ->> 'temperatureUnit'
)`;

/** @param dossierId narrows the list to one dossier. */
export async function listCalculations(
	membership: Membership | null,
	query: ListQuery<CalculationColumn>,
	dossierId?: string,
	db: Queryable = database()
): Promise<Listed<CalculationRow>> {
	requireAction(membership, 'calculation.read');
	const own = and(
		eq(calculations.organisationId, membership.organisationId),
		inReach(membership, calculations.dossierId),
		isNull(calculations.deletedAt),
		isNull(dossiers.deletedAt),
		dossierId === undefined ? undefined : eq(calculations.dossierId, dossierId)
	);
	const found = matching(query.q, [calculations.title, dossiers.title, dossiers.client, methodTitle]);
	const latest = db
		.select({ outcome: outcomeOfRun.as('outcome') })
		.from(runs)
		.where(and(eq(runs.calculationId, calculations.id), eq(runs.state, 'done')))
		.orderBy(desc(runs.createdAt))
		.limit(1)
		.as('latest');
	return paged(
		query,
		async () => {
			const [counted] = await db
				.select({
					total: count(),
					matching: sql<number>`count(*) filter (where ${found ?? sql`true`})`.mapWith(Number)
				})
				.from(calculations)
				.innerJoin(dossiers, eq(dossiers.id, calculations.dossierId))
				.where(own);
			return counted ?? { total: 0, matching: 0 };
		},
		(limit, offset) =>
			db
				.select({
					id: calculations.id,
					title: calculations.title,
					dossierId: dossiers.id,
					dossierTitle: dossiers.title,
					kind: sql<QuestionKind>`${calculations.draft} ->> 'kind'`,
					method,
					outcome: sql<RunOutcome | null>`${latest.outcome}`,
					updatedAt: calculations.updatedAt
				})
				.from(calculations)
				.innerJoin(dossiers, eq(dossiers.id, calculations.dossierId))
				.leftJoinLateral(latest, sql`true`)
				.where(and(own, found))
				.orderBy(...ordered(sortedBy[query.sort], query.order, calculations.id))
				.limit(limit)
				.offset(offset)
	);
}
