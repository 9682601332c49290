import { sql } from 'drizzle-orm';
import PgBoss from 'pg-boss';
import type { Queryable } from '../db';
import { executorIn } from './executor';
import type { JobName, JobPayloads } from './names';

export interface EnqueueOptions {
	/** Whose work it is. An organisation's hundredth waiting job stands behind another one's first. */
	organisationId?: string;
	/** Seconds to wait before the first attempt. */
	delaySeconds?: number;
	/** At most one such job in every period of this many seconds; a further one is dropped without an error. */
	oncePerSeconds?: number;
}

let sender: PgBoss | undefined;

/** Only builds statements; each call brings the connection to run them on. */
function statements(): PgBoss {
	sender ??= new PgBoss({
		db: {
			executeSql: () => Promise.reject(new Error('A job is enqueued on the connection that it is given.'))
		},
		supervise: false,
		schedule: false
	});
	return sender;
}

/** Enough to push a burst behind everybody else's work; counting further would cost and change nothing. */
const farBehind = 1000;

async function waitingOf(db: Queryable, name: JobName, organisationId: string): Promise<number> {
	const { rows } = await db.execute<{ waiting: number }>(sql`
		select count(*)::int as waiting from (
			select 1 from pgboss.job
			where name = ${name} and state < 'active' and data ->> 'organisationId' = ${organisationId}
			limit ${farBehind}
		) as waiting`);
	return rows[0]?.waiting ?? 0;
}

/**
 * Puts a job into the queue in the transaction that it is given: rolled back with it, seen by workers only once it
 * is committed. Pass the transaction of the business change that makes the job necessary.
 * @returns the job's id; null only where `oncePerSeconds` dropped it.
 * @throws Error if the queue was never installed (migrations not run).
 */
export async function enqueue<N extends JobName>(
	db: Queryable,
	name: N,
	payload: JobPayloads[N],
	options: EnqueueOptions = {}
): Promise<string | null> {
	const { organisationId, delaySeconds, oncePerSeconds } = options;
	const send: PgBoss.SendOptions = { db: executorIn(db) };
	if (organisationId !== undefined) send.priority = -(await waitingOf(db, name, organisationId));
	if (delaySeconds !== undefined) send.startAfter = delaySeconds;
	if (oncePerSeconds !== undefined) {
		send.singletonSeconds = oncePerSeconds;
		send.singletonKey = name;
	}
	const data = organisationId === undefined ? payload : { ...payload, organisationId };
	const id = await statements().send(name, data, send);
	if (id === null && oncePerSeconds === undefined) {
		throw new Error(`The queue has no place for "${name}" jobs. Run the migrations (npm run db:migrate).`);
	}
	return id;
}
