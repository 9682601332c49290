import { and, eq, sql } from 'drizzle-orm';
import { storable } from '$lib/calculation/storable';
import { recordAudit } from '../access/audit';
import { requireAction } from '../access/can';
import { ConflictError, ForbiddenError, InvalidInputError } from '../access/errors';
import type { Membership } from '../access/membership';
import { inReach } from '../access/reach';
import { database, type Database, type Transaction } from '../db';
import { reports, reviews } from '../db/schema';
import { writeNotice } from '../notices/write';
import { getReport, type ReportView } from '../reports/load';
import { coveredBy, type Covered } from './approval';
import { holdReport } from './hold';
import { handsIn } from './people';
import { ownWorkRefusal, selfApprovalAllowed } from './policy';
import { latestRound, type Round } from './rounds';
import { stateWords } from './words';

const longest = 4000;

function words(text: string, field: string, missing: string): string {
	const clean = storable(text).trim();
	const fault = clean === '' ? missing : clean.length > longest ? `At most ${longest} characters.` : null;
	if (fault !== null) throw new InvalidInputError('Please look at this again.', { [field]: fault });
	return clean;
}

interface Standing {
	report: ReportView;
	round: Round;
	independent: boolean;
}

/** @returns null where the same person decided so already. */
async function standing(
	tx: Transaction,
	membership: Membership,
	seen: ReportView,
	decision: 'approved' | 'returned'
): Promise<Standing | null> {
	const report = await holdReport(tx, membership, seen);
	const round = await latestRound(report, tx);
	const already = round?.state === decision && round.decidedBy === membership.userId;
	if (already && report.state !== 'draft') return null;
	if (report.state !== 'in-review' || round?.state !== 'open') {
		throw new ConflictError(
			`Report ${report.number} is ${stateWords[report.state]} now, no longer in review: there is nothing to decide.`
		);
	}
	const independent = !(await handsIn(report, tx)).has(membership.userId);
	if (!independent && !(await selfApprovalAllowed(membership.organisationId, tx))) {
		throw new ForbiddenError(ownWorkRefusal);
	}
	return { report, round, independent };
}

async function decide(
	tx: Transaction,
	membership: Membership,
	{ report, round, independent }: Standing,
	given: { state: 'approved' | 'returned'; statement: string; covered: Covered }
): Promise<void> {
	await tx
		.update(reviews)
		.set({
			state: given.state,
			statement: given.statement,
			decidedBy: membership.userId,
			decidedAt: sql`now()`,
			independent,
			model: given.covered.model,
			digest: given.covered.digest
		})
		.where(and(eq(reviews.id, round.id), eq(reviews.state, 'open')));
	const [saved] = await tx
		.update(reports)
		.set({ state: given.state, updatedAt: sql`now()` })
		.where(and(eq(reports.id, report.id), inReach(membership, reports.dossierId)))
		.returning({ writers: reports.writers });
	const approved = given.state === 'approved';
	await recordAudit(tx, membership, approved ? 'report.approve' : 'report.return', report.id, {
		review: round.id,
		independent
	});
	await writeNotice(tx, {
		kind: approved ? 'review-approved' : 'review-returned',
		organisationId: membership.organisationId,
		to: [round.sentBy, report.createdBy, ...(saved?.writers ?? [])],
		except: membership.userId,
		subject: { reportId: report.id, reviewId: round.id }
	});
}

/**
 * Approves the report as the page showed it. Said twice by the same person it happens once.
 * @param given.digest `digest` of the page that the reviewer read
 * @throws InvalidInputError (`statement`), ConflictError where the report changed since the page was shown or is not in
 * review, ForbiddenError for one who had a hand in it where the organisation wants a second reader.
 */
export async function approveReport(
	membership: Membership | null,
	reportId: string,
	given: { statement: string; digest: string },
	db: Database = database()
): Promise<void> {
	requireAction(membership, 'report.review');
	const seen = await getReport(membership, reportId, db);
	const statement = words(given.statement, 'statement', 'Say what you checked and what you approve.');
	await db.transaction(async (tx) => {
		const now = await standing(tx, membership, seen, 'approved');
		if (now === null) return;
		const covered = await coveredBy(membership, now.report, tx);
		if (covered.digest !== given.digest) {
			throw new ConflictError(
				'The report is no longer as this page showed it: something that it prints was changed meanwhile. Read it again below, then decide.'
			);
		}
		await decide(tx, membership, now, { state: 'approved', statement, covered });
	});
}

/** Returns the report with reasons. Said twice by the same person it happens once. @throws as `approveReport` */
export async function returnReport(
	membership: Membership | null,
	reportId: string,
	given: { reasons: string },
	db: Database = database()
): Promise<void> {
	requireAction(membership, 'report.review');
	const seen = await getReport(membership, reportId, db);
	const statement = words(given.reasons, 'reasons', 'Say what has to be mended before you can approve it.');
	await db.transaction(async (tx) => {
		const now = await standing(tx, membership, seen, 'returned');
		if (now === null) return;
		const covered = await coveredBy(membership, now.report, tx);
		await decide(tx, membership, now, { state: 'returned', statement, covered });
	});
}
