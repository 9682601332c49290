import { and, eq, isNull } from 'drizzle-orm';
import { can } from '../access/can';
import type { Membership } from '../access/membership';
import type { Queryable } from '../db';
import {
	dossierGuests,
	dossiers,
	issues,
	memberships,
	notices,
	organisations,
	reports,
	reviews,
	users
} from '../db/schema';
import {
	approvalVoidMail,
	reportIssuedMail,
	reviewApprovedMail,
	reviewAskedMail,
	reviewReturnedMail,
	type ReportFacts
} from '../mail/review-mails';
import type { Mail } from '../mail/transport';

export type Notice = typeof notices.$inferSelect;

/** The mail of a notice, or why there is none to send any more. */
export type Composed = { mail: Mail } | { problem: string };

interface About {
	report: ReportFacts;
	dossierId: string;
}

async function reportOf(notice: Notice, db: Queryable): Promise<About | undefined> {
	const [row] = await db
		.select({
			id: reports.id,
			number: reports.number,
			revision: reports.revision,
			title: reports.title,
			dossierId: reports.dossierId,
			organisation: organisations.name
		})
		.from(reports)
		.innerJoin(dossiers, eq(dossiers.id, reports.dossierId))
		.innerJoin(organisations, eq(organisations.id, reports.organisationId))
		.where(
			and(
				eq(reports.id, notice.subject.reportId),
				eq(reports.organisationId, notice.organisationId),
				isNull(reports.deletedAt),
				isNull(dossiers.deletedAt)
			)
		);
	if (row === undefined) return undefined;
	const { id, number, revision, title, dossierId, organisation } = row;
	const { organisationId } = notice;
	const report = { id, name: `${number}, revision ${revision}`, title, organisation, organisationId };
	return { report, dossierId };
}

/** What the person may see now, whatever they could when the notice was written. */
async function accessOf(
	notice: Notice,
	dossierId: string,
	db: Queryable
): Promise<'member' | 'guest' | null> {
	const { organisationId, userId } = notice;
	const [member] = await db
		.select({ roles: memberships.roles })
		.from(memberships)
		.where(and(eq(memberships.organisationId, organisationId), eq(memberships.userId, userId)));
	if (member !== undefined) {
		const membership: Membership = {
			organisationId,
			organisationName: '',
			userId,
			roles: member.roles,
			onlyDossiers: null
		};
		if (can(membership, notice.kind === 'review-asked' ? 'report.review' : 'report.read')) return 'member';
	}
	const guests = await db.$count(
		dossierGuests,
		and(eq(dossierGuests.dossierId, dossierId), eq(dossierGuests.userId, userId))
	);
	return guests > 0 ? 'guest' : null;
}

async function nameOf(id: string | null, db: Queryable): Promise<string> {
	const [row] = id === null ? [] : await db.select({ name: users.name }).from(users).where(eq(users.id, id));
	return row?.name ?? 'Somebody whose account is gone';
}

/** Writes the mail from what is true now. */
export async function composeNotice(notice: Notice, db: Queryable): Promise<Composed> {
	const about = await reportOf(notice, db);
	if (about === undefined) return { problem: 'The report is gone.' };
	const access = await accessOf(notice, about.dossierId, db);
	if (access === null) return { problem: 'The person has no access to the report any more.' };
	const [person] = await db
		.select({ name: users.name, email: users.email })
		.from(users)
		.where(eq(users.id, notice.userId));
	if (person === undefined) return { problem: 'The account is gone.' };
	const to = { name: person.name, email: person.email };
	const { report } = about;
	if (notice.kind === 'report-issued') {
		const [issue] = await db
			.select({ code: issues.code })
			.from(issues)
			.where(eq(issues.id, notice.subject.issueId ?? ''));
		return issue === undefined
			? { problem: 'The issue is gone.' }
			: { mail: reportIssuedMail(to, report, issue.code) };
	}
	const [round] = await db
		.select()
		.from(reviews)
		.where(eq(reviews.id, notice.subject.reviewId ?? ''));
	if (round === undefined) return { problem: 'The review is gone.' };
	if (notice.kind === 'review-asked') {
		// Taken back or decided before the mail could leave: nothing is left to ask for.
		if (round.state !== 'open') return { problem: 'The review was over before the mail could be sent.' };
		const asked = { by: await nameOf(round.sentBy, db), note: round.note, guest: access === 'guest' };
		return { mail: reviewAskedMail(to, report, asked) };
	}
	if (notice.kind === 'approval-void') {
		return {
			mail: approvalVoidMail(to, report, round.voidReason ?? 'Something that it covered was changed.')
		};
	}
	const decision = { by: await nameOf(round.decidedBy, db), statement: round.statement };
	return {
		mail:
			notice.kind === 'review-approved'
				? reviewApprovedMail(to, report, decision)
				: reviewReturnedMail(to, report, decision)
	};
}
