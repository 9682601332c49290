import { and, asc, eq, gt, isNull, sql } from 'drizzle-orm';
import { storable } from '$lib/calculation/storable';
import { reportLines, wholeLine, type ReportLine } from '$lib/report';
import { recordAudit } from '../access/audit';
import { requireAction } from '../access/can';
import { ConflictError, InvalidInputError, NotFoundError } from '../access/errors';
import { limit } from '../access/limit';
import type { Membership } from '../access/membership';
import { inReach } from '../access/reach';
import { database, type Database, type Queryable } from '../db';
import { reports, reviewComments } from '../db/schema';
import { issueOf, type IssueView } from '../reports/issue';
import { getReport, type ReportView } from '../reports/load';
import { coveredBy } from './approval';
import { holdReport } from './hold';
import { namesOf } from './people';
import { presentPlaces } from './present-place';
import { latestRound } from './rounds';
import type { CommentView } from './types';
import { stateWords } from './words';

/** Longest remark, characters. */
export const longestComment = 4000;

/** Of a very long line the beginning is quoted. */
const longestQuotation = 1500;

function quotation(line: ReportLine): string {
	const whole = wholeLine(line);
	return whole.length > longestQuotation ? `${whole.slice(0, longestQuotation)} …` : whole;
}

function bodyOf(given: string): string {
	const body = storable(given).trim();
	const fault =
		body === ''
			? 'Write the remark.'
			: body.length > longestComment
				? `At most ${longestComment} characters.`
				: null;
	if (fault !== null) throw new InvalidInputError('Please look at this again.', { body: fault });
	return body;
}

const isOpen = ({ state }: Pick<ReportView, 'state'>): boolean =>
	['draft', 'in-review', 'returned', 'approved'].includes(state);

/** Remarks are for what can still be changed. */
export function takesRemarks(
	report: Pick<ReportView, 'state'>,
	issue: Pick<IssueView, 'state'> | null
): boolean {
	return isOpen(report) && (issue === null || issue.state === 'failed');
}

async function requireUnissued(membership: Membership, report: ReportView, db: Queryable): Promise<void> {
	if (takesRemarks(report, await issueOf(membership, report, db))) return;
	throw new ConflictError(
		`Report ${report.number} is ${isOpen(report) ? 'being issued' : stateWords[report.state]}: a remark could no longer change it.`
	);
}

/** Remarks on a line. @returns its id @throws InvalidInputError (`body`, `place`), ConflictError once issued */
export async function addComment(
	membership: Membership | null,
	reportId: string,
	given: { place: string; body: string },
	db: Database = database()
): Promise<string> {
	requireAction(membership, 'report.comment');
	const report = await getReport(membership, reportId, db);
	await requireUnissued(membership, report, db);
	const body = bodyOf(given.body);
	// Read here and not taken from the form: what is quoted is what the report says.
	const { model } = await coveredBy(membership, report, db);
	const line = reportLines(model).find(({ place }) => place === given.place);
	if (line === undefined) {
		throw new InvalidInputError('This line is no longer in the report. Look at it again.', {
			place: 'This line is no longer in the report.'
		});
	}
	return insert(membership, report, { place: line.place, quoted: quotation(line), body, answers: null }, db);
}

async function insert(
	membership: Membership,
	report: ReportView,
	given: { place: string; quoted: string; body: string; answers: string | null },
	db: Database
): Promise<string> {
	await limit(`review-comment:${membership.userId}`, 60, 600, db);
	return db.transaction(async (tx) => {
		// One at a time on a report, so that of a form sent twice the second finds the first.
		await holdReport(tx, membership, report);
		const [said] = await tx
			.select({ id: reviewComments.id })
			.from(reviewComments)
			.where(
				and(
					eq(reviewComments.reportId, report.id),
					eq(reviewComments.writtenBy, membership.userId),
					eq(reviewComments.place, given.place),
					eq(reviewComments.body, given.body),
					given.answers === null ? isNull(reviewComments.answers) : eq(reviewComments.answers, given.answers),
					gt(reviewComments.writtenAt, sql`now() - interval '10 minutes'`)
				)
			);
		if (said !== undefined) return said.id;
		const round = await latestRound(report, tx);
		const [row] = await tx
			.insert(reviewComments)
			.values({
				...given,
				organisationId: membership.organisationId,
				reportId: report.id,
				revision: report.revision,
				round: round?.round ?? 0,
				writtenBy: membership.userId
			})
			.returning({ id: reviewComments.id });
		if (row === undefined) throw new Error('The remark was not stored.');
		await recordAudit(tx, membership, 'report.comment', report.id, { comment: row.id });
		return row.id;
	});
}

type Comment = typeof reviewComments.$inferSelect;

/** A remark in reach, with its report. @throws NotFoundError */
async function findComment(
	membership: Membership,
	id: string,
	db: Queryable
): Promise<{ comment: Comment; report: ReportView }> {
	const [row] = await db
		.select({ comment: reviewComments })
		.from(reviewComments)
		.innerJoin(reports, eq(reports.id, reviewComments.reportId))
		.where(
			and(
				eq(reviewComments.id, id),
				eq(reviewComments.organisationId, membership.organisationId),
				inReach(membership, reports.dossierId)
			)
		);
	if (row === undefined) throw new NotFoundError('remark');
	return { comment: row.comment, report: await getReport(membership, row.comment.reportId, db) };
}

/** Answers a remark; an answer to an answer answers the remark. @returns the answer's id and the report's */
export async function answerComment(
	membership: Membership | null,
	commentId: string,
	given: { body: string },
	db: Database = database()
): Promise<{ id: string; reportId: string }> {
	requireAction(membership, 'report.comment');
	const { comment, report } = await findComment(membership, commentId, db);
	await requireUnissued(membership, report, db);
	const { place, quoted } = comment;
	const answers = comment.answers ?? comment.id;
	const id = await insert(membership, report, { place, quoted, body: bodyOf(given.body), answers }, db);
	return { id, reportId: report.id };
}

/** Settles or opens a remark. Said twice it happens once. */
async function setSettled(
	membership: Membership | null,
	commentId: string,
	settled: boolean,
	db: Database
): Promise<string> {
	requireAction(membership, 'report.comment');
	const { comment, report } = await findComment(membership, commentId, db);
	if (comment.answers !== null) throw new NotFoundError('remark');
	await requireUnissued(membership, report, db);
	await db
		.update(reviewComments)
		.set(
			settled ? { settledAt: sql`now()`, settledBy: membership.userId } : { settledAt: null, settledBy: null }
		)
		.where(and(eq(reviewComments.id, comment.id), settled ? isNull(reviewComments.settledAt) : undefined));
	return report.id;
}

/** Marks a remark as dealt with. @returns the report's id */
export async function settleComment(
	membership: Membership | null,
	commentId: string,
	db: Database = database()
): Promise<string> {
	return setSettled(membership, commentId, true, db);
}

/** Opens a settled remark again. @returns the report's id */
export async function unsettleComment(
	membership: Membership | null,
	commentId: string,
	db: Database = database()
): Promise<string> {
	return setSettled(membership, commentId, false, db);
}

/**
 * Remarks of a report's present revision with their answers, oldest first.
 * @param lines of the report as it stands; what they say now is compared with what was quoted
 */
export async function commentsOf(
	report: ReportView,
	lines: readonly ReportLine[],
	db: Queryable
): Promise<CommentView[]> {
	const rows = await db
		.select()
		.from(reviewComments)
		.where(and(eq(reviewComments.reportId, report.id), eq(reviewComments.revision, report.revision)))
		.orderBy(asc(reviewComments.writtenAt), asc(reviewComments.id));
	const { organisationId, id: dossierId } = report.dossier;
	const ids = rows.flatMap(({ writtenBy, settledBy }) => [writtenBy, settledBy]);
	const person = await namesOf(organisationId, dossierId, ids, db);
	const now = new Map(lines.map((line) => [line.place, quotation(line)]));
	const placeNow = await presentPlaces(
		report,
		rows.map(({ place }) => place),
		db
	);
	const views = rows.map((row): CommentView & { answersTo: string | null } => ({
		id: row.id,
		place: placeNow(row.place),
		round: row.round,
		quoted: row.quoted,
		lineChanged: now.get(placeNow(row.place)) !== row.quoted,
		body: row.body,
		writtenBy: person(row.writtenBy),
		writtenAt: row.writtenAt,
		settledAt: row.settledAt,
		settledBy: row.settledAt === null ? null : person(row.settledBy),
		answers: [],
		answersTo: row.answers
	}));
	const plain = ({ answersTo: _, ...view }: (typeof views)[number]): CommentView => view;
	return views
		.filter(({ answersTo }) => answersTo === null)
		.map((view) => ({
			...plain(view),
			answers: views.filter(({ answersTo }) => answersTo === view.id).map(plain)
		}));
}

/** All remarks of the report's present revision with their answers, oldest first. */
export async function listComments(
	membership: Membership | null,
	reportId: string,
	db: Queryable = database()
): Promise<CommentView[]> {
	requireAction(membership, 'report.read');
	const report = await getReport(membership, reportId, db);
	const lines =
		report.runIds.length === 0 ? [] : reportLines((await coveredBy(membership, report, db)).model);
	return commentsOf(report, lines, db);
}
