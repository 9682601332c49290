import { eq, sql } from 'drizzle-orm';
import { recordAudit } from '../access/audit';
import { requireAction } from '../access/can';
import { ConflictError } from '../access/errors';
import type { Membership } from '../access/membership';
import { database, type Database } from '../db';
import { reports, users } from '../db/schema';
import { issueOf } from '../reports/issue';
import { getReport } from '../reports/load';
import { approvalOf, voidApproval } from './approval';
import { holdReport } from './hold';
import { latestRound } from './rounds';
import { stateWords } from './words';

/**
 * Makes an approved report a draft again; its approval is void. Said twice it happens once.
 * @throws ConflictError in another state, or while its issue is under way or done.
 */
export async function reopenReport(
	membership: Membership | null,
	reportId: string,
	db: Database = database()
): Promise<void> {
	requireAction(membership, 'report.write');
	const seen = await getReport(membership, reportId, db);
	await db.transaction(async (tx) => {
		const report = await holdReport(tx, membership, seen);
		if (report.state === 'draft' && (await latestRound(report, tx))?.state === 'void') return;
		const issue = await issueOf(membership, report, tx);
		const issuing = issue !== null && issue.state !== 'failed';
		if (report.state !== 'approved' || issuing) {
			throw new ConflictError(
				issuing
					? `The issue of report ${report.number} was asked for already. A correction is a new revision.`
					: `Report ${report.number} is ${stateWords[report.state]}; only an approved one is opened again.`
			);
		}
		const round = await approvalOf(report, tx);
		if (round === undefined) {
			// Issued without a reviewer, as the rules allow, and the issue failed: there is no approval to void.
			await tx
				.update(reports)
				.set({ state: 'draft', updatedAt: sql`now()` })
				.where(eq(reports.id, report.id));
		} else {
			const [person] = await tx
				.select({ name: users.name })
				.from(users)
				.where(eq(users.id, membership.userId));
			const reason = `${person?.name ?? 'An author'} opened the report again for changes.`;
			await voidApproval(tx, membership, report, round, { reason, except: membership.userId });
		}
		await recordAudit(tx, membership, 'report.reopen', report.id);
	});
}
