import { createHash } from 'node:crypto';
import { and, eq, ne } from 'drizzle-orm';
import { NoExportsError } from '../../billing/errors';
import type { Database, Transaction } from '../../db';
import { issues } from '../../db/schema';
import { takeIssue, writeIssue, type Issue } from '../issue-fencing';
import type { JobDefinition } from '../job';

export interface SignedReport {
	/** The signed document, byte for byte as it will be handed out. */
	pdf: Uint8Array;
	certificateId: string;
	/** The time written in the document. */
	issuedAt: Date;
}

/** What the job needs from the house's report and signing subjects. */
export interface ReportIssuing {
	/** Renders the frozen model to PDF bytes. */
	render(issue: Issue, db: Database, signal: AbortSignal): Promise<Uint8Array>;
	/** Signs the rendered bytes with the organisation's certificate. */
	sign(issue: Issue, rendered: Uint8Array, db: Database): Promise<SignedReport>;
	/**
	 * What else must become true together with the kept bytes: the report's state, the audit entry, the export used.
	 * @throws NoExportsError where none is left: then nothing is kept
	 */
	publish(issue: Issue, signed: SignedReport, tx: Transaction): Promise<void>;
}

/**
 * Renders, signs and keeps one issue. Run twice, or by two workers at once, it keeps one document: only the attempt
 * that took the issue last may write, and it writes bytes, states and the job's end in one transaction.
 */
export function issueReportJob(issuing: ReportIssuing): JobDefinition<'issue-report'> {
	return {
		async handle({ issueId }, context) {
			const issue = await takeIssue(context.db, issueId);
			if (issue === undefined) return;
			const rendered = await issuing.render(issue, context.db, context.signal);
			await context.guarded((tx) => writeIssue(tx, issue.id, issue.attempt, { state: 'signing' }));
			const signed = await issuing.sign(issue, rendered, context.db);
			const pdf = Buffer.from(signed.pdf);
			const keep = context.finish(async (tx) => {
				await writeIssue(tx, issue.id, issue.attempt, {
					state: 'done',
					pdf,
					sha256: createHash('sha256').update(pdf).digest('hex'),
					size: pdf.length,
					certificateId: signed.certificateId,
					issuedAt: signed.issuedAt
				});
				await issuing.publish(issue, signed, tx);
			});
			await keep.catch(async (cause: unknown) => {
				if (!(cause instanceof NoExportsError)) throw cause;
				// An outcome, not a fault: the file is dropped with its transaction, and paying mends it.
				const { message, kind } = cause;
				await context.finish((tx) =>
					writeIssue(tx, issue.id, issue.attempt, { state: 'failed', problem: message, problemKind: kind })
				);
			});
		},
		async abandon({ issueId }, problem, tx) {
			await tx
				.update(issues)
				.set({ state: 'failed', problem, problemKind: 'fault' })
				.where(and(eq(issues.id, issueId), ne(issues.state, 'done')));
		}
	};
}
