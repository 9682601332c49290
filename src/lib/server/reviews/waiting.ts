import { and, arrayContains, asc, eq, inArray, isNull } from 'drizzle-orm';
import { can, requireAction } from '../access/can';
import type { Membership } from '../access/membership';
import { inReach } from '../access/reach';
import { database, type Queryable } from '../db';
import { dossiers, reports, reviews, users } from '../db/schema';

/** A report that somebody was asked to review and nobody has decided on yet. */
export interface WaitingReport {
	reportId: string;
	number: string;
	revision: number;
	title: string;
	dossierTitle: string;
	/** Null where that account is gone. */
	sentBy: string | null;
	sentAt: Date;
}

const mostWaiting = 50;

/** What waits for the person's own review, longest waiting first; nothing for one who reviews nothing. */
export async function waitingForMe(
	membership: Membership | null,
	db: Queryable = database()
): Promise<WaitingReport[]> {
	requireAction(membership, 'report.read');
	if (!can(membership, 'report.review')) return [];
	return db
		.select({
			reportId: reports.id,
			number: reports.number,
			revision: reports.revision,
			title: reports.title,
			dossierTitle: dossiers.title,
			sentBy: users.name,
			sentAt: reviews.sentAt
		})
		.from(reviews)
		.innerJoin(reports, eq(reports.id, reviews.reportId))
		.innerJoin(dossiers, eq(dossiers.id, reports.dossierId))
		.leftJoin(users, eq(users.id, reviews.sentBy))
		.where(
			and(
				eq(reviews.organisationId, membership.organisationId),
				inReach(membership, reports.dossierId),
				eq(reviews.state, 'open'),
				eq(reports.state, 'in-review'),
				isNull(reports.deletedAt),
				isNull(dossiers.deletedAt),
				arrayContains(reviews.askedOf, [membership.userId])
			)
		)
		.orderBy(asc(reviews.sentAt), asc(reports.id))
		.limit(mostWaiting);
}

/** Who is asked to read a report just now. */
export interface AskedReaders {
	/** In the order in which they were asked. */
	names: string[];
	/** The person at the page is one of them. */
	me: boolean;
}

/** For each of these reports that is in review: with whom. */
export async function readersOf(
	membership: Membership | null,
	reportIds: readonly string[],
	db: Queryable = database()
): Promise<Map<string, AskedReaders>> {
	requireAction(membership, 'report.read');
	if (reportIds.length === 0) return new Map();
	const rounds = await db
		.select({ reportId: reviews.reportId, askedOf: reviews.askedOf })
		.from(reviews)
		.innerJoin(reports, eq(reports.id, reviews.reportId))
		.where(
			and(
				inArray(reviews.reportId, [...reportIds]),
				eq(reviews.organisationId, membership.organisationId),
				inReach(membership, reports.dossierId),
				eq(reviews.state, 'open')
			)
		);
	const ids = [...new Set(rounds.flatMap(({ askedOf }) => askedOf))];
	const people =
		ids.length === 0
			? []
			: await db.select({ id: users.id, name: users.name }).from(users).where(inArray(users.id, ids));
	const nameOf = new Map(people.map(({ id, name }) => [id, name ?? 'somebody']));
	return new Map(
		rounds.map(({ reportId, askedOf }) => [
			reportId,
			{
				names: askedOf.flatMap((id) => nameOf.get(id) ?? []),
				me: askedOf.includes(membership.userId)
			}
		])
	);
}
