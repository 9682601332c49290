import { and, eq, isNull, or, sql } from 'drizzle-orm';
import { can, requireAction } from '../access/can';
import type { Membership } from '../access/membership';
import { database, type Queryable } from '../db';
import { dossierGuests, memberships, reviewComments, users } from '../db/schema';
import { issueOf } from '../reports/issue';
import { getReport, type ReportView } from '../reports/load';
import { handsIn, namesOf } from './people';
import { selfApprovalAllowed } from './policy';
import { roundsOf, roundViews, type Round } from './rounds';
import type { ApprovalView, ReviewerChoice, ReviewState } from './types';

/** Remarks that are neither settled nor answered, of the whole revision or of one round. */
export async function unansweredOf(
	report: Pick<ReportView, 'id' | 'revision'>,
	round: number | null,
	db: Queryable
): Promise<number> {
	const answers = sql`exists (select 1 from review_comments as answer where answer.answers = ${reviewComments.id})`;
	return db.$count(
		reviewComments,
		and(
			eq(reviewComments.reportId, report.id),
			eq(reviewComments.revision, report.revision),
			round === null ? undefined : eq(reviewComments.round, round),
			isNull(reviewComments.answers),
			isNull(reviewComments.settledAt),
			sql`not ${answers}`
		)
	);
}

async function approvalView(
	report: ReportView,
	rounds: readonly Round[],
	db: Queryable
): Promise<ApprovalView | null> {
	const last = rounds.find(({ state }) => state === 'approved' || state === 'void');
	if (last === undefined) return null;
	const { round, decidedBy, decidedAt, independent } = last;
	if (last.state === 'void') {
		return { holds: false, round, why: last.voidReason ?? 'It was made void.' };
	}
	const { organisationId, id: dossierId } = report.dossier;
	const person = await namesOf(organisationId, dossierId, [decidedBy], db);
	return { holds: true, round, by: person(decidedBy), at: decidedAt, independent };
}

/** Where a report's review stands, for its page. */
export async function reviewOf(
	membership: Membership | null,
	reportId: string,
	db: Queryable = database()
): Promise<ReviewState> {
	requireAction(membership, 'report.read');
	const report = await getReport(membership, reportId, db);
	const { state } = report;
	const rounds = await roundsOf(report, db);
	const issue = await issueOf(membership, report, db);
	const mayWrite = can(membership, 'report.write');
	return {
		state,
		rounds: await roundViews(report, rounds, db),
		approval: await approvalView(report, rounds, db),
		unanswered: await unansweredOf(report, null, db),
		secondReaderWanted: !(await selfApprovalAllowed(membership.organisationId, db)),
		maySend: mayWrite && (state === 'draft' || state === 'returned'),
		mayRecall: mayWrite && state === 'in-review',
		mayReview: can(membership, 'report.review') && state === 'in-review',
		mayReopen: mayWrite && state === 'approved' && (issue === null || issue.state === 'failed')
	};
}

/** Everybody who reviews in this organisation or is a guest of the dossier; those who cannot be asked say why. */
export async function reviewersFor(
	membership: Membership | null,
	reportId: string,
	db: Queryable = database()
): Promise<ReviewerChoice[]> {
	requireAction(membership, 'report.write');
	const report = await getReport(membership, reportId, db);
	const rows = await db
		.select({
			id: users.id,
			name: users.name,
			email: users.email,
			roles: memberships.roles,
			guest: dossierGuests.userId
		})
		.from(users)
		.leftJoin(
			memberships,
			and(eq(memberships.userId, users.id), eq(memberships.organisationId, membership.organisationId))
		)
		.leftJoin(
			dossierGuests,
			and(eq(dossierGuests.userId, users.id), eq(dossierGuests.dossierId, report.dossier.id))
		)
		.where(
			or(
				eq(memberships.organisationId, membership.organisationId),
				eq(dossierGuests.dossierId, report.dossier.id)
			)
		)
		.orderBy(sql`lower(${users.name})`, users.id);
	const hands = await handsIn(report, db);
	return rows.flatMap(({ id, name, email, roles, guest }) => {
		const reviews = roles?.includes('reviewer') === true;
		if (!reviews && guest === null) return [];
		const why = hands.has(id) ? 'had a hand in this report or its calculations.' : null;
		return [{ id, name: name ?? email, email, guest: roles === null, able: why === null, why }];
	});
}
