import { createHash } from 'node:crypto';
import { and, eq, inArray, isNull, ne, notExists, or, sql, type SQL } from 'drizzle-orm';
import { canonicalJson } from '$lib/record';
import { changedPlaces, type ReportModel, type ReviewSource } from '$lib/report';
import { listed } from '$lib/wording';
import { recordAudit } from '../access/audit';
import type { Membership } from '../access/membership';
import { inReach } from '../access/reach';
import type { Queryable, Transaction } from '../db';
import { issues, reports, reviewerFigures, reviews } from '../db/schema';
import { writeNotice } from '../notices/write';
import { getReport, type ReportView } from '../reports/load';
import { modelOf, unissued } from '../reports/model';
import { namesOf } from './people';
import { latestRound, type Round } from './rounds';

/** What an approval covers: the whole report with the reviewers' figures, without what only its issue adds. */
export interface Covered {
	model: ReportModel;
	/** SHA-256 over the model's canonical JSON, hex digits. */
	digest: string;
}

export function digestOf(model: ReportModel): string {
	return createHash('sha256').update(canonicalJson(model)).digest('hex');
}

/** @throws InvalidInputError where the report has no result. */
export async function coveredBy(membership: Membership, report: ReportView, db: Queryable): Promise<Covered> {
	const model = await modelOf(membership, report, unissued, db);
	return { model, digest: digestOf(model) };
}

/** The newest round of an approved report where it is an approval; undefined where none holds. */
export async function approvalOf(
	report: Pick<ReportView, 'id' | 'revision'>,
	db: Queryable
): Promise<Round | undefined> {
	const round = await latestRound(report, db);
	return round?.state === 'approved' ? round : undefined;
}

/** Why an approval does not hold any more, in words; null while it does. */
export function staleness(covered: Covered, round: Pick<Round, 'model' | 'digest'>): string | null {
	if (covered.digest === round.digest) return null;
	const changed = changedPlaces(covered.model, round.model as ReportModel);
	const [first] = changed;
	if (first === undefined) return 'something that the approval covers differs from what was approved';
	const most = 4;
	const named =
		changed.length <= most
			? listed(changed, 'and')
			: `${changed.slice(0, most).join(', ')} and ${changed.length - most} more`;
	return `${named} ${changed.length === 1 ? 'differs' : 'differ'} from what was approved`;
}

/** What the report prints of an approval. */
export async function printedApproval(
	report: ReportView,
	round: Round,
	db: Queryable
): Promise<ReviewSource> {
	const { organisationId, id: dossierId } = report.dossier;
	const person = (await namesOf(organisationId, dossierId, [round.decidedBy], db))(round.decidedBy);
	const role = person.guest ? 'guest reviewer from outside the organisation' : 'reviewer';
	return {
		kind: round.independent ? 'reviewed' : 'approved-by-author',
		by: { name: person.name, ...(round.independent ? { role } : {}) },
		at: (round.decidedAt ?? round.sentAt).toISOString(),
		...(round.statement === '' ? {} : { remarks: round.statement })
	};
}

/** What a rendering says of the review as it stands now. */
export async function presentReview(report: ReportView, db: Queryable): Promise<ReviewSource> {
	const round = report.state === 'approved' ? await approvalOf(report, db) : undefined;
	return round === undefined ? unissued.review : printedApproval(report, round, db);
}

/**
 * Ends an approval: the report is a draft again, and its author and approver are told. Under the report's lock.
 * @param reason in plain words, shown to both
 * @param except who needs no mail about it
 */
export async function voidApproval(
	tx: Transaction,
	membership: Membership,
	report: ReportView,
	round: Round,
	given: { reason: string; except?: string }
): Promise<void> {
	await tx
		.update(reviews)
		.set({ state: 'void', voidReason: given.reason })
		.where(and(eq(reviews.id, round.id), eq(reviews.state, 'approved')));
	await tx
		.update(reports)
		.set({ state: 'draft', updatedAt: sql`now()` })
		.where(and(eq(reports.id, report.id), inReach(membership, reports.dossierId)));
	await recordAudit(tx, membership, 'report.approval-void', report.id, { review: round.id });
	await writeNotice(tx, {
		kind: 'approval-void',
		organisationId: membership.organisationId,
		to: [report.createdBy, round.sentBy, round.decidedBy],
		...(given.except === undefined ? {} : { except: given.except }),
		subject: { reportId: report.id, reviewId: round.id }
	});
}

/** Which reports a change may reach. */
export type Reaching = 'organisation' | { dossierId: string } | { personId: string };

function reached(reaching: Reaching, tx: Transaction): SQL | undefined {
	if (reaching === 'organisation') return undefined;
	if ('dossierId' in reaching) return eq(reports.dossierId, reaching.dossierId);
	const entered = tx
		.select({ id: reviewerFigures.reportId })
		.from(reviewerFigures)
		.where(eq(reviewerFigures.enteredBy, reaching.personId));
	return or(eq(reports.createdBy, reaching.personId), inArray(reports.id, entered));
}

/**
 * Voids the approvals that a change took the ground from: those of reports that are approved, not being issued, and
 * read otherwise than what was approved. Call it in the transaction of the change, after it.
 * @param because the change as a sentence without its end: "The dossier was changed"
 * @returns numbers of the reports whose approval is void now
 */
export async function voidStaleApprovals(
	tx: Transaction,
	membership: Membership,
	reaching: Reaching,
	because: string
): Promise<string[]> {
	const live = tx
		.select({ one: sql`1` })
		.from(issues)
		.where(
			and(eq(issues.reportId, reports.id), eq(issues.revision, reports.revision), ne(issues.state, 'failed'))
		);
	const approved = await tx
		.select({ id: reports.id })
		.from(reports)
		.where(
			and(
				eq(reports.organisationId, membership.organisationId),
				inReach(membership, reports.dossierId),
				eq(reports.state, 'approved'),
				isNull(reports.deletedAt),
				notExists(live),
				reached(reaching, tx)
			)
		)
		.orderBy(reports.id)
		.for('update', { of: reports });
	const voided: string[] = [];
	for (const { id } of approved) {
		const report = await getReport(membership, id, tx);
		const round = await approvalOf(report, tx);
		if (round === undefined) continue;
		const stale = staleness(await coveredBy(membership, report, tx), round);
		if (stale === null) continue;
		await voidApproval(tx, membership, report, round, { reason: `${because}: ${stale}.` });
		voided.push(report.number);
	}
	return voided;
}
