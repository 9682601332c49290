import { eq, sql } from 'drizzle-orm';
import type { Database } from '../db';
import { workers } from '../db/schema';

/** Seconds between two heartbeats of a worker process. */
export const heartbeatSeconds = 5;

/** A worker whose last heartbeat is older than this many seconds counts as dead. */
export const deadAfterSeconds = 30;

/** Says that this worker process is alive, by the database's clock. */
export async function beat(
	db: Database,
	worker: { id: string; host: string; processId: number }
): Promise<void> {
	await db
		.insert(workers)
		.values(worker)
		.onConflictDoUpdate({ target: workers.id, set: { seenAt: sql`now()` } });
}

/** Takes the worker off the list, when it stops in good order. */
export async function signOff(db: Database, id: string): Promise<void> {
	await db.delete(workers).where(eq(workers.id, id));
}

/** @returns how many worker processes are alive. */
export async function countLiveWorkers(db: Database): Promise<number> {
	return await db.$count(
		workers,
		sql`${workers.seenAt} > now() - make_interval(secs => ${deadAfterSeconds})`
	);
}
