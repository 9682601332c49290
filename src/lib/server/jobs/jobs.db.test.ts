import { setTimeout as sleep } from 'node:timers/promises';
import { eq, sql } from 'drizzle-orm';
import pino from 'pino';
import { afterAll, afterEach, beforeAll, describe, expect, it } from 'vitest';
import { openDatabase } from '../db';
import { rateWindows } from '../db/schema';
import { testDatabase } from '../testing/db';
import { PermanentJobError, type JobDefinition } from './job';
import { LeaseLostError } from './lease';
import { enqueue } from './queue';
import { startRunner, type Runner } from './runner';
import { idleJobs } from './testing/idle-jobs';

let test: Awaited<ReturnType<typeof testDatabase>>;
let connection: ReturnType<typeof openDatabase>;
let runner: Runner | undefined;

beforeAll(async () => {
	test = await testDatabase();
	connection = openDatabase(test.url, 6);
});
afterEach(async () => {
	await runner?.stop(1000);
	runner = undefined;
	await test.db.execute(sql`delete from pgboss.job`);
});
afterAll(async () => {
	await connection.pool.end();
	await test.drop();
});

async function work(computeRun: JobDefinition<'compute-run'>, concurrency = 1): Promise<void> {
	runner = await startRunner({
		...connection,
		jobs: idleJobs({ 'compute-run': computeRun }),
		log: pino({ level: 'silent' }),
		concurrency,
		pollMilliseconds: 20
	});
}

async function until(condition: () => boolean | Promise<boolean>, milliseconds = 10_000): Promise<void> {
	const deadline = Date.now() + milliseconds;
	while (!(await condition())) {
		if (Date.now() > deadline) throw new Error('It did not happen in time.');
		await sleep(20);
	}
}

async function stateOf(
	id: string | null
): Promise<{ state: string; tries: number; limit: number } | undefined> {
	const { rows } = await test.db.execute<{ state: string; tries: number; limit: number }>(
		sql`select state::text, retry_count as tries, retry_limit as limit from pgboss.job where id = ${id}`
	);
	return rows[0];
}

/** As a worker's death looks to the queue: the hold is overdue. */
async function loseLease(id: string | null): Promise<void> {
	await test.db.execute(sql`
		update pgboss.job set state = 'retry', start_after = now() where id = ${id} and state = 'active'`);
}

const mark = (key: string) => ({ key, windowStart: sql`now()`, count: 1 });

describe('enqueue', () => {
	it('puts a job in with the transaction, and not without it', async () => {
		const seen: string[] = [];
		await test.db
			.transaction(async (tx) => {
				await enqueue(tx, 'compute-run', { runId: 'rolled-back' });
				throw new Error('changed my mind');
			})
			.catch(() => undefined);
		await test.db.transaction(async (tx) => {
			await enqueue(tx, 'compute-run', { runId: 'committed' });
		});
		await work({
			handle: async ({ runId }) => {
				seen.push(runId);
			},
			abandon: () => Promise.resolve()
		});
		await until(() => seen.length > 0);
		await sleep(200);
		expect(seen).toEqual(['committed']);
	});

	it("lets another organisation's single job pass a burst", async () => {
		const order: string[] = [];
		for (let i = 0; i < 30; i += 1) {
			await enqueue(test.db, 'compute-run', { runId: `burst-${i}` }, { organisationId: 'a' });
		}
		await enqueue(test.db, 'compute-run', { runId: 'single' }, { organisationId: 'b' });
		await work({
			handle: async ({ runId }) => {
				order.push(runId);
			},
			abandon: () => Promise.resolve()
		});
		await until(() => order.length === 31);
		expect(order.indexOf('single')).toBeLessThan(2);
	});

	it('drops a second job of the same period where asked to', async () => {
		const first = await enqueue(test.db, 'purge-deleted', {}, { oncePerSeconds: 3600 });
		const second = await enqueue(test.db, 'purge-deleted', {}, { oncePerSeconds: 3600 });
		expect(first).not.toBeNull();
		expect(second).toBeNull();
	});
});

describe('the runner', () => {
	it('tries a failing job again and completes it', async () => {
		const attempts: number[] = [];
		const id = await enqueue(test.db, 'compute-run', { runId: 'r' });
		await test.db.execute(sql`update pgboss.job set retry_delay = 0, retry_backoff = false`);
		await work({
			handle: (_payload, { attempt }) => {
				attempts.push(attempt);
				return attempt < 3 ? Promise.reject(new Error('not yet')) : Promise.resolve();
			},
			abandon: () => Promise.resolve()
		});
		await until(async () => (await stateOf(id))?.state === 'completed');
		expect(attempts).toEqual([1, 2, 3]);
	});

	it('tells the subject once the attempts are used up, without our internals', async () => {
		const given: string[] = [];
		const id = await enqueue(test.db, 'compute-run', { runId: 'r' });
		await test.db.execute(sql`update pgboss.job set retry_delay = 0, retry_backoff = false`);
		let attempts = 0;
		await work({
			handle: () => {
				attempts += 1;
				return Promise.reject(new Error(`fault ${attempts}`));
			},
			abandon: async ({ runId }, problem, tx) => {
				given.push(`${runId}: ${problem}`);
				await tx.insert(rateWindows).values(mark('abandoned'));
			}
		});
		await until(() => given.length > 0);
		expect(attempts).toBe(4);
		expect(given).toEqual([expect.stringMatching(/^r: This could not be finished/)]);
		expect((await stateOf(id))?.state).toBe('failed');
		await until(async () => (await test.db.$count(rateWindows, eq(rateWindows.key, 'abandoned'))) === 1);
	});

	it('does not repeat what cannot be mended', async () => {
		const given: string[] = [];
		let attempts = 0;
		await enqueue(test.db, 'compute-run', { runId: 'r' });
		await work({
			handle: () => {
				attempts += 1;
				return Promise.reject(new PermanentJobError('The run is gone.'));
			},
			abandon: (_payload, problem) => {
				given.push(problem);
				return Promise.resolve();
			}
		});
		await until(() => given.length > 0);
		expect([attempts, given]).toEqual([1, ['The run is gone.']]);
	});

	it('lets an overtaken attempt neither write nor complete nor fail the job of its successor', async () => {
		const outcomes: string[] = [];
		const id = await enqueue(test.db, 'compute-run', { runId: 'r' });
		await work(
			{
				handle: async (_payload, context) => {
					if (context.attempt === 1) {
						await loseLease(id);
						await until(() => outcomes.includes('second taken'));
						await context
							.finish(async (tx) => {
								await tx.insert(rateWindows).values(mark('overtaken'));
							})
							.catch((error: unknown) => {
								outcomes.push(error instanceof LeaseLostError ? 'first refused' : String(error));
								throw error;
							});
					} else {
						outcomes.push('second taken');
						await until(() => outcomes.includes('first refused'));
						// Time for the first attempt's failure to do harm, if it could.
						await sleep(200);
						await context.finish(async (tx) => {
							await tx.insert(rateWindows).values(mark('successor'));
						});
					}
				},
				abandon: () => Promise.resolve()
			},
			2
		);
		await until(async () => (await stateOf(id))?.state === 'completed');
		expect(outcomes).toEqual(['second taken', 'first refused']);
		expect(await test.db.$count(rateWindows, eq(rateWindows.key, 'overtaken'))).toBe(0);
		expect(await test.db.$count(rateWindows, eq(rateWindows.key, 'successor'))).toBe(1);
		expect((await stateOf(id))?.tries).toBe(1);
	});

	it('keeps neither outcome nor completion when the writing fails', async () => {
		const id = await enqueue(test.db, 'compute-run', { runId: 'r' });
		let attempts = 0;
		await work({
			handle: async (_payload, context) => {
				attempts += 1;
				await context.finish(async (tx) => {
					await tx.insert(rateWindows).values(mark('half'));
					throw new Error('the second half failed');
				});
			},
			abandon: () => Promise.resolve()
		});
		await until(async () => (await stateOf(id))?.state === 'retry');
		expect(attempts).toBe(1);
		expect(await test.db.$count(rateWindows, eq(rateWindows.key, 'half'))).toBe(0);
	});

	it('puts a job back for another worker when it is stopped, without using up an attempt', async () => {
		let aborted = false;
		const id = await enqueue(test.db, 'compute-run', { runId: 'r' });
		let taken = false;
		await work({
			handle: (_payload, { signal }) => {
				taken = true;
				return new Promise((resolve) => {
					signal.addEventListener('abort', () => {
						aborted = true;
						resolve();
					});
				});
			},
			abandon: () => Promise.resolve()
		});
		await until(() => taken);
		const before = await stateOf(id);
		await runner?.stop(0);
		runner = undefined;
		expect(aborted).toBe(true);
		expect(await stateOf(id)).toEqual({ state: 'retry', tries: 0, limit: (before?.limit ?? 0) + 1 });
	});
});
