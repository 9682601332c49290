import { and, eq, inArray, sql } from 'drizzle-orm';
import type { Queryable, Transaction } from '../db';
import { issues } from '../db/schema';
import { LeaseLostError } from './lease';

export type Issue = typeof issues.$inferSelect;

/**
 * Takes an issue for one attempt at it: raises `attempt`, so that every earlier attempt is fenced off.
 * @returns the row with its new attempt; undefined where the issue is done, failed for good, or gone.
 */
export async function takeIssue(db: Queryable, issueId: string): Promise<Issue | undefined> {
	const [taken] = await db
		.update(issues)
		.set({ attempt: sql`${issues.attempt} + 1`, state: 'rendering', problem: null, problemKind: null })
		.where(and(eq(issues.id, issueId), inArray(issues.state, ['queued', 'rendering', 'signing'])))
		.returning();
	return taken;
}

/** What the way to a finished issue writes; `done` only together with the signed bytes and the debit. */
export type IssueProgress =
	| { state: 'signing' }
	| {
			state: 'done';
			pdf: Buffer;
			sha256: string;
			size: number;
			certificateId: string | null;
			issuedAt: Date;
	  }
	| { state: 'failed'; problem: string; problemKind: 'no-exports' };

/**
 * Writes to an issue as the attempt that took it.
 * @throws LeaseLostError if a later attempt has taken it, or it is over.
 */
export async function writeIssue(
	tx: Transaction,
	issueId: string,
	attempt: number,
	values: IssueProgress
): Promise<void> {
	const written = await tx
		.update(issues)
		.set(values)
		.where(
			and(
				eq(issues.id, issueId),
				eq(issues.attempt, attempt),
				inArray(issues.state, ['rendering', 'signing'])
			)
		)
		.returning({ id: issues.id });
	if (written.length !== 1) throw new LeaseLostError();
}
