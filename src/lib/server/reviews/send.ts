import { and, eq, sql } from 'drizzle-orm';
import { z } from 'zod';
import { storable } from '$lib/calculation/storable';
import { recordAudit } from '../access/audit';
import { requireAction } from '../access/can';
import { ConflictError, InvalidInputError } from '../access/errors';
import { limit } from '../access/limit';
import type { Membership } from '../access/membership';
import { database, type Database } from '../db';
import { reports, reviews } from '../db/schema';
import { writeNotice } from '../notices/write';
import { getReport } from '../reports/load';
import { requirePrintable } from '../reports/model';
import { openDuties } from '../reports/open-duties';
import { coveredBy } from './approval';
import { faultsOf } from './faults';
import { holdReport } from './hold';
import { latestRound } from './rounds';
import { reviewersFor } from './state';
import { stateWords } from './words';

export interface Sending {
	/** Ids of the people who are asked: see `reviewersFor`. */
	reviewers: string[];
	note: string;
	/** `version` that the page showed. */
	baseVersion: number;
}

const sending = z.strictObject({
	reviewers: z
		.array(z.uuid())
		.min(1, 'Choose at least one reviewer.')
		.max(20, 'At most 20 reviewers can be asked at once.'),
	note: z.string().trim().max(2000, 'Note: at most 2000 characters.').transform(storable),
	baseVersion: z.int().positive()
});

/** Owed at the issue, but no bar to somebody's reading: an addressee may be named last. */
const later = ['addressee-missing'];

/**
 * Sends a draft or returned report for review. Sent twice by a double click it is one round.
 * @returns the round's id
 * @throws InvalidInputError with faults by field (`reviewers`, `note`) or place of an unmet duty, ConflictError where
 * it was saved since or is in another state.
 */
export async function sendForReview(
	membership: Membership | null,
	reportId: string,
	given: Sending,
	db: Database = database()
): Promise<string> {
	requireAction(membership, 'report.write');
	const seen = await getReport(membership, reportId, db);
	// Each sending mails everybody who is asked.
	await limit(`review-send:${membership.userId}`, 30, 3600, db);
	const parsed = sending.safeParse(given);
	if (!parsed.success) throw faultsOf(parsed.error);
	const { note, baseVersion } = parsed.data;
	const asked = [...new Set(parsed.data.reviewers)];
	return db.transaction(async (tx) => {
		const report = await holdReport(tx, membership, seen);
		const before = await latestRound(report, tx);
		if (report.state === 'in-review' && before?.state === 'open' && before.sentBy === membership.userId) {
			return before.id;
		}
		if (report.state !== 'draft' && report.state !== 'returned') {
			throw new ConflictError(
				`Report ${report.number} is ${stateWords[report.state]} and cannot be sent for review.`
			);
		}
		if (report.version !== baseVersion) {
			throw new ConflictError(
				'This report was saved elsewhere since you opened it. Look at it again, then send it.'
			);
		}
		await requireAble(membership, report.id, asked, tx);
		const { model, digest } = await coveredBy(membership, report, tx);
		requirePrintable(model);
		const unmet = openDuties(model).filter(({ code }) => !later.includes(code));
		if (unmet.length > 0) {
			throw new InvalidInputError(
				'Before somebody reviews it, the report still needs this.',
				Object.fromEntries(unmet.map((duty) => [duty.place, duty.message]))
			);
		}
		const [round] = await tx
			.insert(reviews)
			.values({
				organisationId: membership.organisationId,
				reportId: report.id,
				revision: report.revision,
				round: (before?.round ?? 0) + 1,
				sentBy: membership.userId,
				note,
				askedOf: asked,
				model,
				digest
			})
			.returning({ id: reviews.id });
		if (round === undefined) throw new Error('The round was not stored.');
		await tx
			.update(reports)
			.set({ state: 'in-review', updatedAt: sql`now()` })
			.where(eq(reports.id, report.id));
		await recordAudit(tx, membership, 'report.send', report.id, { review: round.id, asked });
		await writeNotice(tx, {
			kind: 'review-asked',
			organisationId: membership.organisationId,
			to: asked,
			subject: { reportId: report.id, reviewId: round.id }
		});
		return round.id;
	});
}

async function requireAble(
	membership: Membership,
	reportId: string,
	asked: readonly string[],
	db: Parameters<typeof reviewersFor>[2]
): Promise<void> {
	const choices = await reviewersFor(membership, reportId, db);
	for (const id of asked) {
		const choice = choices.find((one) => one.id === id);
		const why = choice === undefined ? 'One of the people chosen cannot review this report.' : choice.why;
		if (choice?.able === true) continue;
		const message = choice === undefined ? why : `${choice.name} cannot be asked: ${why ?? ''}`;
		throw new InvalidInputError('Please choose again.', { reviewers: message ?? '' });
	}
}

/** Takes a report back from review: it is a draft again. Said twice it happens once. */
export async function recallReview(
	membership: Membership | null,
	reportId: string,
	db: Database = database()
): Promise<void> {
	requireAction(membership, 'report.write');
	const seen = await getReport(membership, reportId, db);
	await db.transaction(async (tx) => {
		const report = await holdReport(tx, membership, seen);
		const round = await latestRound(report, tx);
		if (report.state === 'draft' && round?.state === 'recalled') return;
		if (report.state !== 'in-review' || round?.state !== 'open') {
			throw new ConflictError(
				`Report ${report.number} is ${stateWords[report.state]}: there is nothing to take back from review.`
			);
		}
		await tx
			.update(reviews)
			.set({ state: 'recalled' })
			.where(and(eq(reviews.id, round.id), eq(reviews.state, 'open')));
		await tx
			.update(reports)
			.set({ state: 'draft', updatedAt: sql`now()` })
			.where(eq(reports.id, report.id));
		await recordAudit(tx, membership, 'report.recall', report.id, { review: round.id });
	});
}
