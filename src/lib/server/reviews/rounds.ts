import { and, desc, eq } from 'drizzle-orm';
import type { Queryable } from '../db';
import { reviews } from '../db/schema';
import type { ReportView } from '../reports/load';
import { namesOf } from './people';
import type { RoundView } from './types';

export type Round = typeof reviews.$inferSelect;

/** The rounds of the report's present revision, newest first. */
export async function roundsOf(report: Pick<ReportView, 'id' | 'revision'>, db: Queryable): Promise<Round[]> {
	return db
		.select()
		.from(reviews)
		.where(and(eq(reviews.reportId, report.id), eq(reviews.revision, report.revision)))
		.orderBy(desc(reviews.round));
}

/** The newest round, or undefined before the first. */
export async function latestRound(
	report: Pick<ReportView, 'id' | 'revision'>,
	db: Queryable
): Promise<Round | undefined> {
	const [round] = await db
		.select()
		.from(reviews)
		.where(and(eq(reviews.reportId, report.id), eq(reviews.revision, report.revision)))
		.orderBy(desc(reviews.round))
		.limit(1);
	return round;
}

/** Rounds with the names of who took part. */
export async function roundViews(
	report: Pick<ReportView, 'dossier'>,
	rounds: readonly Round[],
	db: Queryable
): Promise<RoundView[]> {
	const { organisationId, id: dossierId } = report.dossier;
	const ids = rounds.flatMap((round) => [round.sentBy, round.decidedBy, ...round.askedOf]);
	const person = await namesOf(organisationId, dossierId, ids, db);
	return rounds.map((round) => ({
		id: round.id,
		round: round.round,
		state: round.state,
		sentBy: person(round.sentBy),
		sentAt: round.sentAt,
		note: round.note,
		askedOf: round.askedOf.map(person),
		decidedBy: round.decidedAt === null ? null : person(round.decidedBy),
		decidedAt: round.decidedAt,
		statement: round.statement,
		independent: round.independent,
		voidReason: round.voidReason
	}));
}
