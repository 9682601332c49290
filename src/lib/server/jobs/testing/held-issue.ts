import { eq, sql } from 'drizzle-orm';
import pino from 'pino';
import { debitExport } from '../../billing/ledger';
import { openDatabase } from '../../db';
import { reports } from '../../db/schema';
import { issueReportJob } from '../handlers/issue-report';
import { startRunner } from '../runner';
import { idleJobs } from './idle-jobs';

/*
 * A worker process for tests that kill it while it issues: stops for ever at the moment that HOLD names, `signed`
 * (before the transaction that keeps file and debit) or `debited` (within it, both written), and says so.
 */
const hold = process.env.HOLD;
const { db, pool } = openDatabase(process.env.DATABASE_URL ?? '', 4);
const waitForEver = (moment: string) => {
	process.stdout.write(`${moment}\n`);
	return new Promise<never>(() => undefined);
};
const job = issueReportJob({
	render: () => Promise.resolve(new TextEncoder().encode('rendered by the killed')),
	sign: async (_issue, pdf) => {
		if (hold === 'signed') await waitForEver(hold);
		return { pdf, certificateId: '00000000-0000-4000-8000-000000000000', issuedAt: new Date(0) };
	},
	publish: async (issue, _signed, tx) => {
		await tx
			.update(reports)
			.set({ state: 'issued', updatedAt: sql`now()` })
			.where(eq(reports.id, issue.reportId));
		await debitExport(tx, issue.organisationId, issue.id);
		if (hold === 'debited') await waitForEver(hold);
	}
});
await startRunner({
	db,
	pool,
	jobs: idleJobs({ 'issue-report': job }),
	log: pino({ level: 'silent' }),
	concurrency: 1,
	pollMilliseconds: 50
});
