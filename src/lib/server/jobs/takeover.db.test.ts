import { spawn, type ChildProcess } from 'node:child_process';
import { setTimeout as sleep } from 'node:timers/promises';
import { sql } from 'drizzle-orm';
import pino from 'pino';
import { afterAll, beforeAll, expect, it } from 'vitest';
import { openDatabase } from '../db';
import { rateWindows } from '../db/schema';
import { testDatabase } from '../testing/db';
import { enqueue } from './queue';
import { startRunner } from './runner';
import { idleJobs } from './testing/idle-jobs';

let test: Awaited<ReturnType<typeof testDatabase>>;
const children: ChildProcess[] = [];

beforeAll(async () => {
	test = await testDatabase();
});
afterAll(async () => {
	for (const child of children) child.kill('SIGKILL');
	await test.drop();
});

/** A worker process that takes one job and holds it, with its output so far. */
async function startHolder(): Promise<{ child: ChildProcess; said: () => string }> {
	const child = spawn(process.execPath, ['--import', 'tsx', 'src/lib/server/jobs/testing/held-job.ts'], {
		env: { ...process.env, DATABASE_URL: test.url },
		stdio: ['pipe', 'pipe', 'inherit']
	});
	children.push(child);
	let output = '';
	child.stdout?.on('data', (chunk: Buffer) => (output += chunk.toString()));
	const deadline = Date.now() + 30_000;
	while (!output.includes('taken')) {
		if (Date.now() > deadline || child.exitCode !== null) throw new Error('The worker process took no job.');
		await sleep(50);
	}
	return { child, said: () => output };
}

it('gives the jobs of a killed and of a frozen worker to another one within a minute, and keeps one outcome', async () => {
	const killedJob = await enqueue(test.db, 'compute-run', { runId: 'of-the-killed' });
	const killed = await startHolder();
	const frozenJob = await enqueue(test.db, 'compute-run', { runId: 'of-the-frozen' });
	const frozen = await startHolder();
	killed.child.kill('SIGKILL');
	frozen.child.kill('SIGSTOP');
	const began = Date.now();

	const { db, pool } = openDatabase(test.url, 6);
	const taken = new Map<string, { attempt: number; after: number }>();
	const runner = await startRunner({
		db,
		pool,
		log: pino({ level: 'silent' }),
		concurrency: 2,
		jobs: idleJobs({
			'compute-run': {
				handle: async ({ runId }, context) => {
					await context.finish(async (tx) => {
						await tx
							.insert(rateWindows)
							.values({ key: `rescued ${runId}`, windowStart: sql`now()`, count: 1 });
					});
					taken.set(context.jobId, { attempt: context.attempt, after: Date.now() - began });
				},
				abandon: () => Promise.resolve()
			}
		})
	});
	while (taken.size < 2 && Date.now() - began < 70_000) await sleep(100);

	for (const job of [killedJob, frozenJob]) {
		const rescue = taken.get(job ?? '');
		expect(rescue?.attempt).toBe(2);
		expect(rescue?.after).toBeLessThan(60_000);
	}

	// The frozen one wakes up after its job was finished by the other, and tries to finish it too.
	frozen.child.kill('SIGCONT');
	frozen.child.stdin?.write('go\n');
	const deadline = Date.now() + 15_000;
	while (!/finished|refused/.test(frozen.said()) && Date.now() < deadline) await sleep(50);
	expect(frozen.said()).toContain('refused LeaseLostError');
	const kept = await test.db.select({ key: rateWindows.key }).from(rateWindows).orderBy(rateWindows.key);
	expect(kept.map(({ key }) => key)).toEqual(['rescued of-the-frozen', 'rescued of-the-killed']);
	await runner.stop(1000);
	await pool.end();
}, 150_000);
