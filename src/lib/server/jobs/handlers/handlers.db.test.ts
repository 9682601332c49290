import { createHash } from 'node:crypto';
import { setTimeout as sleep } from 'node:timers/promises';
import { eq, sql } from 'drizzle-orm';
import pino from 'pino';
import { afterAll, afterEach, beforeAll, describe, expect, it } from 'vitest';
import { compute } from '../../../calculation/compute';
import { openDatabase } from '../../db';
import { calculations, dossiers, evidence, issues, reports, runs } from '../../db/schema';
import { testDatabase } from '../../testing/db';
import { enqueue } from '../queue';
import { startRunner, type Runner } from '../runner';
import { idleJobs } from '../testing/idle-jobs';
import { sampleRequest, sampleRows } from '../testing/rows';
import type { JobDefinitions } from '../job';
import { computeRunJob } from './compute-run';
import { issueReportJob, type ReportIssuing } from './issue-report';
import { purgeDeletedJob } from './purge-deleted';

let test: Awaited<ReturnType<typeof testDatabase>>;
let connection: ReturnType<typeof openDatabase>;
let runner: Runner | undefined;

beforeAll(async () => {
	test = await testDatabase();
	connection = openDatabase(test.url, 6);
});
afterEach(async () => {
	await runner?.stop(1000);
	await test.db.execute(sql`delete from pgboss.job`);
});
afterAll(async () => {
	await connection.pool.end();
	await test.drop();
});

async function work(own: Partial<JobDefinitions>): Promise<void> {
	runner = await startRunner({
		...connection,
		jobs: idleJobs(own),
		log: pino({ level: 'silent' }),
		concurrency: 2,
		pollMilliseconds: 20
	});
}

async function until(condition: () => Promise<boolean>): Promise<void> {
	const deadline = Date.now() + 20_000;
	while (!(await condition())) {
		if (Date.now() > deadline) throw new Error('It did not happen in time.');
		await sleep(20);
	}
}

async function noneWaiting(): Promise<boolean> {
	const { rows } = await test.db.execute(sql`select 1 from pgboss.job where state < 'completed'`);
	return rows.length === 0;
}

describe('compute-run', () => {
	const runOf = async (id: string) => (await test.db.select().from(runs).where(eq(runs.id, id)))[0];

	it('keeps the record that the same request gives anywhere', async () => {
		const { run } = await sampleRows(test.db);
		await enqueue(test.db, 'compute-run', { runId: run.id });
		await work({ 'compute-run': computeRunJob(compute) });
		await until(noneWaiting);
		const kept = await runOf(run.id);
		const expected = await compute(sampleRequest);
		expect(kept?.state).toBe('done');
		expect(kept?.progress).toBe(100);
		expect(kept?.recordHash).toBe(expected.record);
		expect(kept?.finishedAt).not.toBeNull();
		expect((JSON.parse(kept?.record ?? '') as { result: unknown }).result).toEqual(expected);
	});

	it('is done once: a second delivery changes nothing', async () => {
		const { run } = await sampleRows(test.db);
		let computed = 0;
		const counting = computeRunJob((request, options) => {
			computed += 1;
			return compute(request, options);
		});
		await work({ 'compute-run': counting });
		await enqueue(test.db, 'compute-run', { runId: run.id });
		await until(noneWaiting);
		const before = await runOf(run.id);
		await enqueue(test.db, 'compute-run', { runId: run.id });
		await until(noneWaiting);
		expect(computed).toBe(1);
		expect(await runOf(run.id)).toEqual(before);
	});

	it('says in words what cannot be computed, after one attempt', async () => {
		const { run } = await sampleRows(test.db, {
			...sampleRequest,
			inputs: { ...sampleRequest.inputs, bondAlbedo: { value: 1.2 } }
		});
		await enqueue(test.db, 'compute-run', { runId: run.id });
		await work({ 'compute-run': computeRunJob(compute) });
		await until(async () => (await runOf(run.id))?.state === 'failed');
		expect((await runOf(run.id))?.problem).toMatch(/albedo/i);
	});
});

describe('issue-report', () => {
	const issueOf = async (id: string) => (await test.db.select().from(issues).where(eq(issues.id, id)))[0];
	const bytes = (text: string) => new TextEncoder().encode(text);
	const certificateId = '00000000-0000-4000-8000-000000000000';
	const issuing = (own: Partial<ReportIssuing> = {}): ReportIssuing => ({
		render: (issue) => Promise.resolve(bytes(`rendered at attempt ${issue.attempt}`)),
		sign: (_issue, pdf) => Promise.resolve({ pdf, certificateId, issuedAt: new Date(0) }),
		publish: async (issue, _signed, tx) => {
			await tx.update(reports).set({ state: 'issued' }).where(eq(reports.id, issue.reportId));
		},
		...own
	});

	it('keeps bytes, digest and state together', async () => {
		const { addIssue, report } = await sampleRows(test.db);
		const issue = await addIssue();
		await enqueue(test.db, 'issue-report', { issueId: issue.id });
		await work({ 'issue-report': issueReportJob(issuing()) });
		await until(noneWaiting);
		const kept = await issueOf(issue.id);
		expect(kept?.state).toBe('done');
		expect(kept?.pdf?.toString()).toBe('rendered at attempt 1');
		expect(kept?.sha256).toBe(createHash('sha256').update('rendered at attempt 1').digest('hex'));
		const [published] = await test.db.select().from(reports).where(eq(reports.id, report.id));
		expect(published?.state).toBe('issued');
	});

	it('keeps nothing of an attempt that a later one has overtaken', async () => {
		const { addIssue } = await sampleRows(test.db);
		const issue = await addIssue();
		const slow = issuing({
			render: async (taken) => {
				// The same issue is taken by a second delivery while this one renders.
				if (taken.attempt === 1) {
					await enqueue(test.db, 'issue-report', { issueId: issue.id });
					await until(async () => (await issueOf(issue.id))?.state === 'done');
				}
				return bytes(`rendered at attempt ${taken.attempt}`);
			}
		});
		await enqueue(test.db, 'issue-report', { issueId: issue.id });
		await work({ 'issue-report': issueReportJob(slow) });
		await until(async () => (await issueOf(issue.id))?.state === 'done');
		await sleep(200);
		const kept = await issueOf(issue.id);
		expect(kept?.attempt).toBe(2);
		expect(kept?.pdf?.toString()).toBe('rendered at attempt 2');
	});

	it('shows the failure once its attempts are used up, and never undoes a finished issue', async () => {
		const { addIssue } = await sampleRows(test.db);
		const issue = await addIssue();
		await enqueue(test.db, 'issue-report', { issueId: issue.id });
		await test.db.execute(sql`update pgboss.job set retry_delay = 0, retry_backoff = false`);
		const job = issueReportJob(issuing({ sign: () => Promise.reject(new Error('The key is sealed.')) }));
		await work({ 'issue-report': job });
		await until(async () => (await issueOf(issue.id))?.state === 'failed');
		expect(await issueOf(issue.id)).toMatchObject({ pdf: null, attempt: 6 });
		expect((await issueOf(issue.id))?.problem).not.toContain('sealed');
		await test.db.update(issues).set({ state: 'done' }).where(eq(issues.id, issue.id));
		await test.db.transaction((tx) => job.abandon({ issueId: issue.id }, 'late', tx));
		expect((await issueOf(issue.id))?.state).toBe('done');
	});
});

describe('purge-deleted', () => {
	it('removes what was deleted long ago, but nothing that an issued report stands on', async () => {
		const free = await sampleRows(test.db);
		const bound = await sampleRows(test.db);
		const recent = await sampleRows(test.db);
		await bound.addIssue();
		const longAgo = new Date(Date.now() - 31 * 86_400_000);
		for (const table of [dossiers, calculations, reports, evidence]) {
			await test.db.update(table).set({ deletedAt: longAgo });
			const lately = { deletedAt: new Date() };
			await test.db.update(table).set(lately).where(eq(table.organisationId, recent.organisationId));
		}
		await enqueue(test.db, 'purge-deleted', {});
		await work({ 'purge-deleted': purgeDeletedJob });
		await until(noneWaiting);
		const left = async ({ organisationId }: { organisationId: string }) =>
			Promise.all(
				[dossiers, calculations, reports, evidence, runs].map((table) =>
					test.db.$count(table, eq(table.organisationId, organisationId))
				)
			);
		expect(await left(free)).toEqual([0, 0, 0, 0, 0]);
		expect(await left(bound)).toEqual([1, 1, 1, 1, 1]);
		expect(await left(recent)).toEqual([1, 1, 1, 1, 1]);
	});
});
