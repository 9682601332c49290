import { sql } from 'drizzle-orm';
import type PgBoss from 'pg-boss';
import type { Queryable } from '../db';
import { withoutQueryValues } from '../log';
import { executorIn } from './executor';
import { lease as times } from './names';

/** Another worker holds the job by now, or it is over: nothing that this attempt made may be kept. */
export class LeaseLostError extends Error {
	constructor() {
		super('The job was taken over by another worker, so this attempt is given up.');
		this.name = 'LeaseLostError';
	}
}

/**
 * One attempt's hold on a job. `turn` goes up with every claim, so the pair of id and turn names this attempt and
 * no other. The queue's own complete and fail do not look at it; these do, by locking the job's row first.
 */
export interface Lease {
	/** Queue name, the dead letter's included. */
	queue: string;
	id: string;
	turn: number;
}

/** Renews the hold. @returns false if it was lost. */
export async function renew(db: Queryable, lease: Lease): Promise<boolean> {
	const { rows } = await db.execute(sql`
		update pgboss.job set started_on = now(), expire_in = make_interval(secs => ${times.seconds})
		where name = ${lease.queue} and id = ${lease.id} and state = 'active' and retry_count = ${lease.turn}
		returning 1`);
	return rows.length === 1;
}

/**
 * Locks the job's row until the transaction ends.
 * @throws LeaseLostError if the hold was lost.
 */
export async function requireLease(tx: Queryable, lease: Lease): Promise<void> {
	const { rows } = await tx.execute(sql`
		select 1 from pgboss.job
		where name = ${lease.queue} and id = ${lease.id} and state = 'active' and retry_count = ${lease.turn}
		for update`);
	if (rows.length !== 1) throw new LeaseLostError();
}

/** Marks the job done in the given transaction, under the lock of `requireLease`. */
export async function complete(boss: PgBoss, tx: Queryable, lease: Lease): Promise<void> {
	await requireLease(tx, lease);
	await boss.complete(lease.queue, lease.id, {}, { db: executorIn(tx) });
}

/** Hands the job to the next attempt, or to the dead letter after the last. A lost hold is left to its new holder. */
export async function fail(boss: PgBoss, tx: Queryable, lease: Lease, problem: Error): Promise<void> {
	try {
		await requireLease(tx, lease);
	} catch (error) {
		if (error instanceof LeaseLostError) return;
		throw error;
	}
	const output = {
		name: problem.name,
		message: withoutQueryValues(problem.message),
		stack: withoutQueryValues(problem.stack ?? '')
	};
	await boss.fail(lease.queue, lease.id, output, { db: executorIn(tx) });
}

/** Puts the job back at once without using up an attempt: the process is shutting down, the job is not to blame. */
export async function putBack(db: Queryable, lease: Lease): Promise<void> {
	await db.execute(sql`
		update pgboss.job set state = 'retry', start_after = now(), retry_limit = retry_limit + 1
		where name = ${lease.queue} and id = ${lease.id} and state = 'active' and retry_count = ${lease.turn}`);
}
