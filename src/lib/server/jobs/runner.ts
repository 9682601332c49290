import { setTimeout as sleep } from 'node:timers/promises';
import { sql } from 'drizzle-orm';
import PgBoss from 'pg-boss';
import type pg from 'pg';
import type { Logger } from 'pino';
import type { Database } from '../db';
import { executorOn } from './executor';
import { PermanentJobError, type JobContext, type JobDefinition, type JobDefinitions } from './job';
import { complete, fail, LeaseLostError, putBack, renew, requireLease, type Lease } from './lease';
import { deadLetterOf, jobNames, jobPolicies, lease as times, type JobName } from './names';

export interface RunnerOptions {
	db: Database;
	pool: pg.Pool;
	jobs: JobDefinitions;
	log: Logger;
	/** Jobs at work at once in this process. */
	concurrency: number;
	/** Wait between two looks into empty queues, milliseconds. */
	pollMilliseconds?: number;
}

export interface Runner {
	/**
	 * Takes no further job, waits for those at work, then aborts them and puts them back for another worker.
	 * @param graceMilliseconds how long to wait before aborting.
	 */
	stop(graceMilliseconds: number): Promise<void>;
}

type Claimed = PgBoss.JobWithMetadata<object>;

class ShutdownError extends Error {
	constructor() {
		super('The worker is shutting down.');
		this.name = 'ShutdownError';
	}
}

/**
 * Fetches and runs jobs. Claiming, retrying and dead letters are the queue library's; the hold on a job, its renewal
 * and its completion are ours, because the library would let an attempt that was overtaken complete its successor's.
 */
export async function startRunner(options: RunnerOptions): Promise<Runner> {
	const { db, pool, jobs, log, concurrency, pollMilliseconds = 500 } = options;
	const homeless = jobNames.filter((name) => (jobs as Partial<JobDefinitions>)[name] === undefined);
	if (homeless.length > 0)
		throw new Error(`No handler for ${homeless.join(', ')}: the worker does not start.`);
	const boss = new PgBoss({
		db: executorOn(pool),
		migrate: false,
		schedule: false,
		supervise: true,
		maintenanceIntervalSeconds: 120,
		deleteAfterDays: 30
	});
	boss.on('error', (error) => log.warn({ err: error }, 'queue maintenance failed'));
	await boss.start();

	const stopping = new AbortController();
	const aborts = new Set<AbortController>();
	const sweep = setInterval(() => {
		boss.expire().catch((error: unknown) => log.warn({ err: error }, 'expired jobs could not be swept'));
	}, times.sweepSeconds * 1000);

	let turn = 0;

	/** The queues that have something to do, each in turn first, so that none starves behind a long one. */
	async function waitingQueues(): Promise<string[]> {
		const { rows } = await db.execute<{ name: string }>(sql`
			select distinct name from pgboss.job where state < 'active' and start_after < now() order by name`);
		const names = rows.map((row) => row.name);
		turn += 1;
		const first = names.length === 0 ? 0 : turn % names.length;
		return [...names.slice(first), ...names.slice(0, first)];
	}

	async function claim(): Promise<{ name: JobName; dead: boolean; job: Claimed } | undefined> {
		for (const queue of await waitingQueues()) {
			const name = jobNames.find((known) => known === queue || deadLetterOf(known) === queue);
			if (name === undefined) continue;
			if (stopping.signal.aborted) return undefined;
			const [job] = await boss.fetch<object>(queue, { includeMetadata: true, batchSize: 1 });
			if (job !== undefined) return { name, dead: queue !== name, job };
		}
		return undefined;
	}

	async function run(name: JobName, dead: boolean, job: Claimed): Promise<void> {
		const lease: Lease = { queue: job.name, id: job.id, turn: job.retryCount };
		const jobLog = log.child({ job: job.name, jobId: job.id, attempt: job.retryCount + 1 });
		const abort = new AbortController();
		aborts.add(abort);
		const deadline = Date.now() + jobPolicies[name].limitSeconds * 1000;
		const beat = setInterval(() => {
			if (Date.now() > deadline) {
				abort.abort(new Error(`The job took longer than ${jobPolicies[name].limitSeconds} s.`));
				clearInterval(beat);
				return;
			}
			renew(db, lease).then(
				(held) => {
					if (!held) abort.abort(new LeaseLostError());
				},
				(error: unknown) => jobLog.warn({ err: error }, 'the lease could not be renewed')
			);
		}, times.beatSeconds * 1000);
		const started = Date.now();
		let finished = false;
		const context: JobContext = {
			jobId: job.id,
			attempt: job.retryCount + 1,
			db,
			log: jobLog,
			signal: abort.signal,
			guarded: (write) =>
				db.transaction(async (tx) => {
					await requireLease(tx, lease);
					await write(tx);
				}),
			finish: async (write) => {
				await db.transaction(async (tx) => {
					await requireLease(tx, lease);
					await write(tx);
					await complete(boss, tx, lease);
				});
				finished = true;
			}
		};
		try {
			if (!(await renew(db, lease))) throw new LeaseLostError();
			// The union of definitions cannot be called with the union of payloads; name and payload belong together.
			const definition = jobs[name] as JobDefinition;
			const payload = job.data as never;
			const work = dead
				? context.finish((tx) => definition.abandon(payload, problemIn(job.output), tx))
				: definition.handle(payload, context);
			await Promise.race([work, rejectOnAbort(abort.signal)]);
			// A handler that gave up at the abort has not done the job, though it returned.
			if (!finished) {
				abort.signal.throwIfAborted();
				await context.finish(() => Promise.resolve());
			}
			jobLog.info({ milliseconds: Date.now() - started }, dead ? 'given up' : 'done');
		} catch (error) {
			await settle(lease, job, error, jobLog);
		} finally {
			clearInterval(beat);
			aborts.delete(abort);
		}
	}

	async function settle(lease: Lease, job: Claimed, error: unknown, jobLog: Logger): Promise<void> {
		const problem = error instanceof Error ? error : new Error(String(error));
		try {
			if (problem instanceof LeaseLostError) {
				jobLog.warn(problem.message);
			} else if (problem instanceof ShutdownError) {
				await putBack(db, lease);
				jobLog.info('put back for another worker');
			} else {
				const last = problem instanceof PermanentJobError || job.retryCount >= job.retryLimit;
				await db.transaction(async (tx) => {
					if (problem instanceof PermanentJobError) {
						await tx.execute(sql`
							update pgboss.job set retry_limit = retry_count
							where name = ${lease.queue} and id = ${lease.id} and retry_count = ${lease.turn}`);
					}
					await fail(boss, tx, lease, problem);
				});
				jobLog[last ? 'error' : 'warn'](
					{ err: problem },
					last ? 'failed for good' : 'failed, will be tried again'
				);
			}
		} catch (fault) {
			// The database is away: the lease runs out by itself and the job is taken up again.
			jobLog.warn({ err: fault }, 'the outcome could not be written');
		}
	}

	async function loop(): Promise<void> {
		while (!stopping.signal.aborted) {
			const claimed = await claim().catch((error: unknown) => {
				log.warn({ err: error }, 'no job could be fetched');
				return undefined;
			});
			if (claimed !== undefined) await run(claimed.name, claimed.dead, claimed.job);
			else await sleep(pollMilliseconds, undefined, { signal: stopping.signal }).catch(() => undefined);
		}
	}

	const loops = Array.from({ length: concurrency }, loop);

	return {
		async stop(graceMilliseconds) {
			stopping.abort();
			const ended = Promise.all(loops);
			const patience = new AbortController();
			await Promise.race([
				ended,
				sleep(graceMilliseconds, undefined, { signal: patience.signal }).catch(() => undefined)
			]);
			patience.abort();
			for (const abort of aborts) abort.abort(new ShutdownError());
			await ended;
			clearInterval(sweep);
			await boss.stop({ graceful: false });
		}
	};
}

function rejectOnAbort(signal: AbortSignal): Promise<never> {
	return new Promise((_resolve, reject) => {
		signal.addEventListener('abort', () => reject(signal.reason as Error), { once: true });
	});
}

/** What a person is told: the words of a fault that they can mend; of any other, only that it was. */
function problemIn(output: unknown): string {
	if (typeof output === 'object' && output !== null && 'name' in output && 'message' in output) {
		if (output.name === PermanentJobError.name && typeof output.message === 'string') return output.message;
	}
	return 'This could not be finished in several attempts. The fault is ours and is noted; try again later.';
}
