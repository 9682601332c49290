import { spawn, type ChildProcess } from 'node:child_process';
import { setTimeout as sleep } from 'node:timers/promises';
import { and, eq, isNotNull, sql } from 'drizzle-orm';
import pino from 'pino';
import { afterAll, afterEach, beforeAll, expect, it } from 'vitest';
import { openDatabase } from '../db';
import { exportDebits, exportGrants, issues, memberships, reports } from '../db/schema';
import { issueReportJob, type ReportIssuing } from '../jobs/handlers/issue-report';
import { enqueue } from '../jobs/queue';
import { startRunner, type Runner } from '../jobs/runner';
import { idleJobs } from '../jobs/testing/idle-jobs';
import { reportIssuing } from '../reports/issuing';
import { testDatabase } from '../testing/db';
import { debitExport, exportsLeft, requireExport } from './ledger';
import { giveExports } from './testing/exports';
import { queuedIssues } from './testing/issues';

/* File and debit, neither without the other: with the queue, its workers and the real last step of an issue. */

let test: Awaited<ReturnType<typeof testDatabase>>;
const connections: ReturnType<typeof openDatabase>[] = [];
const runners: Runner[] = [];
const children: ChildProcess[] = [];

beforeAll(async () => {
	test = await testDatabase();
});
afterEach(async () => {
	await Promise.all(runners.splice(0).map((runner) => runner.stop(1000)));
	await Promise.all(connections.splice(0).map(({ pool }) => pool.end()));
	await test.db.execute(sql`delete from pgboss.job`);
});
afterAll(async () => {
	for (const child of children) child.kill('SIGKILL');
	await test.drop();
});

/** Rendering and signing are light here; what is published, and so debited, is the real thing. */
const light: ReportIssuing = {
	render: (issue) => Promise.resolve(new TextEncoder().encode(`file of ${issue.id}`)),
	sign: (_issue, pdf) =>
		Promise.resolve({ pdf, certificateId: '00000000-0000-4000-8000-000000000000', issuedAt: new Date(0) }),
	publish: (issue, signed, tx) => reportIssuing.publish(issue, signed, tx)
};

async function work(workers: number, own: Partial<ReportIssuing> = {}): Promise<void> {
	for (let i = 0; i < workers; i++) {
		const connection = openDatabase(test.url, 6);
		connections.push(connection);
		const jobs = idleJobs({ 'issue-report': issueReportJob({ ...light, ...own }) });
		const log = pino({ level: 'silent' });
		runners.push(await startRunner({ ...connection, jobs, log, concurrency: 4, pollMilliseconds: 20 }));
	}
}

async function until(condition: () => Promise<boolean>, seconds = 30): Promise<void> {
	const deadline = Date.now() + seconds * 1000;
	while (!(await condition())) {
		if (Date.now() > deadline) throw new Error('It did not happen in time.');
		await sleep(50);
	}
}

const noneOpen = async () => {
	const { rows } = await test.db.execute(sql`select 1 from pgboss.job where state < 'completed'`);
	return rows.length === 0;
};

async function outcome(organisationId: string) {
	const own = eq(issues.organisationId, organisationId);
	return {
		signed: await test.db.$count(issues, and(own, eq(issues.state, 'done'), isNotNull(issues.pdf))),
		refused: await test.db.$count(issues, and(own, eq(issues.state, 'failed'))),
		debits: await test.db.$count(exportDebits, eq(exportDebits.organisationId, organisationId)),
		issued: await test.db.$count(
			reports,
			and(eq(reports.organisationId, organisationId), eq(reports.state, 'issued'))
		),
		approved: await test.db.$count(
			reports,
			and(eq(reports.organisationId, organisationId), eq(reports.state, 'approved'))
		)
	};
}

it('signs exactly ten of fifty at once with ten exports left, and keeps the other forty approved', async () => {
	const { organisationId, issueIds } = await queuedIssues(test.db, 50);
	await giveExports(test.db, organisationId, 4);
	await giveExports(test.db, organisationId, 6);
	await work(3);
	await until(noneOpen);
	expect(await outcome(organisationId)).toEqual({
		signed: 10,
		refused: 40,
		debits: 10,
		issued: 10,
		approved: 40
	});
	const refused = await test.db
		.select()
		.from(issues)
		.where(and(eq(issues.organisationId, organisationId), eq(issues.state, 'failed')));
	for (const issue of refused) {
		expect(issue).toMatchObject({ problemKind: 'no-exports', pdf: null, sha256: null });
		expect(issue.problem).toMatch(/No export is left.*buy a pack.*billing page/);
	}
	const debited = await test.db
		.select({ issueId: exportDebits.issueId, pdf: issues.pdf })
		.from(exportDebits)
		.innerJoin(issues, eq(issues.id, exportDebits.issueId))
		.where(eq(exportDebits.organisationId, organisationId));
	expect(debited.every(({ pdf }) => pdf !== null)).toBe(true);
	expect(issueIds).toEqual(expect.arrayContaining(debited.map(({ issueId }) => issueId)));
	expect((await exportsLeft(organisationId, test.db)).left).toBe(0);

	// Once there are exports again, trying again works.
	await giveExports(test.db, organisationId, 1);
	const [again] = refused;
	if (again === undefined) throw new Error('none was refused');
	await test.db.update(issues).set({ state: 'queued' }).where(eq(issues.id, again.id));
	await enqueue(test.db, 'issue-report', { issueId: again.id });
	await until(noneOpen);
	const [kept] = await test.db.select().from(issues).where(eq(issues.id, again.id));
	expect(kept).toMatchObject({ state: 'done', problem: null, problemKind: null });
});

it('gives the last export to one of two', async () => {
	const { organisationId } = await queuedIssues(test.db, 2);
	await giveExports(test.db, organisationId, 1);
	await work(2);
	await until(noneOpen);
	expect(await outcome(organisationId)).toMatchObject({ signed: 1, refused: 1, debits: 1, approved: 1 });
});

it('lets ten of fifty be asked for at once with ten left', async () => {
	const { organisationId, issueIds } = await queuedIssues(test.db, 1);
	await test.db.update(issues).set({ state: 'failed' }).where(eq(issues.organisationId, organisationId));
	await test.db.execute(sql`delete from pgboss.job`);
	await giveExports(test.db, organisationId, 10);
	const [first] = await test.db
		.select()
		.from(issues)
		.where(eq(issues.id, issueIds[0] ?? ''));
	if (first === undefined) throw new Error('not stored');
	const ask = (i: number) =>
		test.db.transaction(async (tx) => {
			await requireExport(tx, organisationId);
			const code = `code-${i}`;
			const { reportId } = first;
			await tx.insert(issues).values({ organisationId, reportId, revision: i + 2, code, model: {} });
		});
	const asked = await Promise.allSettled(Array.from({ length: 50 }, (_, i) => ask(i)));
	expect(asked.filter(({ status }) => status === 'fulfilled')).toHaveLength(10);
	const refusals = asked.filter((one) => one.status === 'rejected').map(({ reason }) => reason as Error);
	expect(refusals.every((error) => error.name === 'NoExportsError')).toBe(true);
	expect(refusals[0]?.message).toContain('being issued at this moment');
});

it('debits nothing for a rendering that fails, and one for an issue delivered three times', async () => {
	const failing = await queuedIssues(test.db, 1);
	await giveExports(test.db, failing.organisationId, 1);
	await test.db.execute(sql`update pgboss.job set retry_delay = 0, retry_backoff = false, retry_limit = 1`);
	await work(1, { render: () => Promise.reject(new Error('The page has no end.')) });
	const failed = async () => (await outcome(failing.organisationId)).refused === 1;
	await until(failed);
	expect(await outcome(failing.organisationId)).toMatchObject({ signed: 0, debits: 0, approved: 1 });
	expect((await exportsLeft(failing.organisationId, test.db)).left).toBe(1);
	await Promise.all(runners.splice(0).map((runner) => runner.stop(1000)));

	const { organisationId, issueIds } = await queuedIssues(test.db, 1);
	await giveExports(test.db, organisationId, 5);
	const issueId = issueIds[0] ?? '';
	for (let i = 0; i < 2; i++) await enqueue(test.db, 'issue-report', { issueId });
	await work(2);
	await until(noneOpen);
	expect(await outcome(organisationId)).toMatchObject({ signed: 1, debits: 1 });
	await test.db.transaction((tx) => debitExport(tx, organisationId, issueId));
	expect(await outcome(organisationId)).toMatchObject({ debits: 1 });
});

it('uses a month’s exports before those to try, and those before a pack that ends', async () => {
	const { organisationId } = await queuedIssues(test.db, 2);
	const inAYear = sql`now() + interval '1 year'`;
	await test.db.insert(exportGrants).values([
		{ organisationId, kind: 'pack', key: 'pack:order', amount: 1, validUntil: inAYear },
		{ organisationId, kind: 'trial', key: 'trial:order', amount: 1 }
	]);
	await work(1);
	await until(noneOpen);
	const used = await test.db
		.select({ kind: exportGrants.kind })
		.from(exportDebits)
		.innerJoin(exportGrants, eq(exportGrants.id, exportDebits.grantId))
		.where(eq(exportDebits.organisationId, organisationId))
		.orderBy(exportDebits.at);
	expect(used.map(({ kind }) => kind)).toEqual(['trial', 'pack']);
});

/** A worker process that stops at a moment of an issue. */
async function startHeld(hold: 'signed' | 'debited'): Promise<ChildProcess> {
	const child = spawn(process.execPath, ['--import', 'tsx', 'src/lib/server/jobs/testing/held-issue.ts'], {
		env: { ...process.env, DATABASE_URL: test.url, HOLD: hold },
		stdio: ['ignore', 'pipe', 'inherit']
	});
	children.push(child);
	let said = '';
	child.stdout?.on('data', (chunk: Buffer) => (said += chunk.toString()));
	await until(() => {
		if (child.exitCode !== null) throw new Error('The worker process ended.');
		return Promise.resolve(said.includes(hold));
	});
	return child;
}

it('keeps no debit without a file and no file without a debit when a worker is killed', async () => {
	const between = await queuedIssues(test.db, 1);
	await giveExports(test.db, between.organisationId, 1);
	const killedAfterSigning = await startHeld('signed');
	const within = await queuedIssues(test.db, 1);
	await giveExports(test.db, within.organisationId, 1);
	const killedAfterDebit = await startHeld('debited');
	killedAfterSigning.kill('SIGKILL');
	killedAfterDebit.kill('SIGKILL');
	const began = Date.now();
	await sleep(500);
	for (const { organisationId } of [between, within]) {
		expect(await outcome(organisationId)).toMatchObject({ signed: 0, debits: 0, issued: 0, approved: 1 });
	}
	await work(1);
	const both = async () => {
		const done = await Promise.all([between, within].map(({ organisationId }) => outcome(organisationId)));
		return done.every(({ signed }) => signed === 1);
	};
	await until(both, 60);
	expect(Date.now() - began).toBeLessThan(60_000);
	for (const { organisationId, issueIds } of [between, within]) {
		expect(await outcome(organisationId)).toMatchObject({ signed: 1, debits: 1, refused: 0, issued: 1 });
		const [kept] = await test.db
			.select()
			.from(issues)
			.where(eq(issues.id, issueIds[0] ?? ''));
		expect(kept?.attempt).toBe(2);
		expect(kept?.pdf?.toString()).toBe(`file of ${issueIds[0]}`);
	}
}, 150_000);

it('issues nothing for one who was taken out while the job waited, and debits nothing', async () => {
	const { organisationId, authorId, issueIds } = await queuedIssues(test.db, 1);
	await giveExports(test.db, organisationId, 3);
	await test.db.delete(memberships).where(eq(memberships.userId, authorId));
	await work(1);
	await until(noneOpen);
	expect(await outcome(organisationId)).toEqual({
		signed: 0,
		refused: 1,
		debits: 0,
		issued: 0,
		approved: 1
	});
	const [issue] = await test.db
		.select()
		.from(issues)
		.where(eq(issues.id, issueIds[0] ?? ''));
	expect(issue).toMatchObject({ problemKind: 'fault', pdf: null });
	expect(issue?.problem).toContain('may no longer issue reports');
});
