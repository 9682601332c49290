import { eq, sql } from 'drizzle-orm';
import type { ReportModel } from '../../report';
import { can } from '../access/can';
import { debitExport } from '../billing/ledger';
import type { Transaction } from '../db';
import { auditEvents, reports } from '../db/schema';
import type { ReportIssuing } from '../jobs/handlers/issue-report';
import type { Issue } from '../jobs/issue-fencing';
import { PermanentJobError } from '../jobs/job';
import { writeNotice } from '../notices/write';
import { membershipIn } from '../organisations/memberships';
import { approvalOf } from '../reviews/approval';
import { organisationSigner, rootPem } from '../signing/authority';
import { signPdf } from '../signing/sign';
import { verifyReport } from '../verification';
import { renderReport, UnprintableTextError } from './render';

/* What the worker does for a report: see ../jobs/handlers for when. */

async function rendered(work: Promise<Uint8Array>): Promise<Uint8Array> {
	try {
		return await work;
	} catch (cause) {
		// Trying again cannot give the document a letter that its typefaces lack; the author can.
		if (cause instanceof UnprintableTextError) throw new PermanentJobError(cause.message, { cause });
		throw cause;
	}
}

/** The watermarked, unsigned rendering of a draft. */
export function renderPreview(model: ReportModel): Promise<Uint8Array> {
	return rendered(renderReport(model, { watermark: true }));
}

/** More trials than this are not computed again here; the command does it for whoever wants to. */
const checkedTrials = 4_000_000;

/**
 * Reads the signed file as a stranger would, before anybody gets it: nothing is issued that would not verify.
 * @throws PermanentJobError with the verifier's reasons
 */
async function requireGenuine(pdf: Uint8Array, root: string): Promise<void> {
	const { verdict, reasons } = await verifyReport(pdf, { rootPem: root, maxTrials: checkedTrials });
	if (verdict !== 'genuine') {
		throw new PermanentJobError(`The signed file would not verify (${verdict}): ${reasons.join(' ')}`);
	}
}

/**
 * A queued job carries no rights of its own: whoever asked for the issue must still be one who may.
 * @throws PermanentJobError
 */
async function requireRightful(issue: Issue, tx: Transaction): Promise<void> {
	const membership =
		issue.requestedBy === null
			? null
			: await membershipIn({ id: issue.requestedBy }, issue.organisationId, tx);
	if (can(membership, 'report.issue')) return;
	throw new PermanentJobError(
		'Whoever asked for this issue may no longer issue reports here. Another author can ask for it again.'
	);
}

/** Author, and who sent, read and approved it. */
async function tellOfIssue(issue: Issue, tx: Transaction): Promise<void> {
	const [report] = await tx
		.select({ id: reports.id, revision: reports.revision, createdBy: reports.createdBy })
		.from(reports)
		.where(eq(reports.id, issue.reportId));
	if (report === undefined) return;
	const approval = await approvalOf(report, tx);
	await writeNotice(tx, {
		kind: 'report-issued',
		organisationId: issue.organisationId,
		to: [report.createdBy, ...(approval ? [approval.sentBy, approval.decidedBy] : [])],
		subject: { reportId: report.id, issueId: issue.id }
	});
}

export const reportIssuing: ReportIssuing = {
	render(issue) {
		const model = issue.model as ReportModel;
		return rendered(
			renderReport(model, {
				signature: {
					name: model.organisation.name,
					reason: `Issue of ${model.number}, revision ${model.revision}`,
					// The model's own date, so that a second attempt renders the same bytes.
					time: new Date(model.dates.issue ?? issue.requestedAt)
				}
			})
		);
	},
	async sign(issue, unsigned, db) {
		const model = issue.model as ReportModel;
		const { certificateId, signer } = await organisationSigner(db, issue.organisationId);
		const pdf = await signPdf(unsigned, signer);
		await requireGenuine(pdf, await rootPem(db));
		return {
			pdf,
			certificateId,
			issuedAt: new Date(model.dates.issue ?? issue.requestedAt)
		};
	},
	async publish(issue, _signed, tx) {
		await requireRightful(issue, tx);
		// First, because it takes the organisation's row, which comes before the report's everywhere.
		await debitExport(tx, issue.organisationId, issue.id);
		await tx
			.update(reports)
			.set({ state: 'issued', updatedAt: sql`now()` })
			.where(eq(reports.id, issue.reportId));
		await tx.insert(auditEvents).values({
			organisationId: issue.organisationId,
			userId: issue.requestedBy,
			action: 'report.issued',
			subject: issue.reportId,
			detail: { issue: issue.id }
		});
		await tellOfIssue(issue, tx);
	}
};
