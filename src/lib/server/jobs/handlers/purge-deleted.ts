import { and, eq, exists, lt, not, sql } from 'drizzle-orm';
import { dropOldWindows } from '../../access/limit';
import { dropEndedSessions } from '../../accounts/sessions';
import { dropUnconfirmed } from '../../accounts/sign-up';
import type { Transaction } from '../../db';
import {
	calculations,
	dossiers,
	evidence,
	issues,
	previews,
	reports,
	runs,
	verificationTokens,
	workers
} from '../../db/schema';
import { dropOldInvitations } from '../../organisations/invitations/withdraw';
import type { JobDefinition } from '../job';

const thirtyDaysAgo = sql`now() - interval '30 days'`;

/**
 * Removes what was deleted more than thirty days ago, except what an issued report stands on: its bytes, its runs and
 * the evidence of its dossier stay for ever.
 */
async function purge(tx: Transaction): Promise<void> {
	const issuesOfReport = tx
		.select({ one: sql`1` })
		.from(issues)
		.where(eq(issues.reportId, reports.id));
	await tx.delete(reports).where(and(lt(reports.deletedAt, thirtyDaysAgo), not(exists(issuesOfReport))));

	const reportsOnCalculation = tx
		.select({ one: sql`1` })
		.from(runs)
		.innerJoin(reports, sql`${runs.id} = any(${reports.runIds})`)
		.where(eq(runs.calculationId, calculations.id));
	await tx
		.delete(calculations)
		.where(and(lt(calculations.deletedAt, thirtyDaysAgo), not(exists(reportsOnCalculation))));

	const issuesIn = (dossierId: typeof dossiers.id | typeof evidence.dossierId) =>
		tx
			.select({ one: sql`1` })
			.from(issues)
			.innerJoin(reports, eq(issues.reportId, reports.id))
			.where(eq(reports.dossierId, dossierId));
	await tx
		.delete(evidence)
		.where(and(lt(evidence.deletedAt, thirtyDaysAgo), not(exists(issuesIn(evidence.dossierId)))));
	await tx
		.delete(dossiers)
		.where(and(lt(dossiers.deletedAt, thirtyDaysAgo), not(exists(issuesIn(dossiers.id)))));

	await tx.delete(verificationTokens).where(lt(verificationTokens.expires, sql`now()`));
	await tx.delete(previews).where(lt(previews.requestedAt, sql`now() - interval '2 days'`));
	await tx.delete(workers).where(lt(workers.seenAt, sql`now() - interval '1 day'`));
}

export const purgeDeletedJob: JobDefinition<'purge-deleted'> = {
	async handle(_payload, { db, finish }) {
		await dropEndedSessions(db);
		await dropUnconfirmed(db);
		await dropOldWindows(db);
		await dropOldInvitations(db);
		await finish(purge);
	},
	// Nobody waits for it: the next hour's job tries again, and the log has the fault.
	abandon: () => Promise.resolve()
};
