import type pg from 'pg';
import PgBoss from 'pg-boss';
import { executorOn } from './executor';
import { deadLetterOf, jobNames, jobPolicies, lease } from './names';

/**
 * Creates or brings up to date the queue's tables and one queue with a dead letter for each job name. Part of
 * the migrations; running it again changes nothing.
 */
export async function installQueues(pool: pg.Pool): Promise<void> {
	const boss = new PgBoss({ db: executorOn(pool), supervise: false, schedule: false, migrate: true });
	// Without a listener an error event would end the process; faults also reject the awaited calls.
	boss.on('error', () => undefined);
	await boss.start();
	try {
		for (const name of jobNames) {
			const { retryLimit, retryDelay } = jobPolicies[name];
			const dead = { name: deadLetterOf(name), retryLimit: 5, retryDelay: 10, retryBackoff: true };
			const live = {
				name,
				policy: 'standard' as const,
				retryLimit,
				retryDelay,
				retryBackoff: true,
				expireInSeconds: lease.seconds,
				deadLetter: dead.name
			};
			await boss.createQueue(dead.name, dead);
			await boss.createQueue(name, live);
			await boss.updateQueue(name, live);
		}
	} finally {
		await boss.stop({ graceful: false });
	}
}
