import { randomUUID } from 'node:crypto';
import { hostname } from 'node:os';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { z } from 'zod';
import { closeDatabase, database, databasePool } from '../lib/server/db';
import { env } from '../lib/server/env';
import { beat, heartbeatSeconds, signOff } from '../lib/server/health/heartbeat';
import { enqueue } from '../lib/server/jobs/queue';
import { jobDefinitions } from '../lib/server/jobs/registry';
import { startRunner } from '../lib/server/jobs/runner';
import { log } from '../lib/server/log';
import { renderPreview, reportIssuing } from '../lib/server/reports/issuing';
import { computeInThread } from './compute-in-thread';

/** Time that jobs at work are given to end by themselves when the process is told to stop, milliseconds. */
const graceMilliseconds = 20_000;

const concurrency = z.coerce.number().int().min(1).max(32).default(2).parse(process.env.WORKER_CONCURRENCY);

async function main(): Promise<void> {
	env();
	const db = database();
	const worker = { id: randomUUID(), host: hostname(), processId: process.pid };
	const jobs = jobDefinitions({
		compute: computeInThread(join(dirname(fileURLToPath(import.meta.url)), 'compute-thread.js')),
		issuing: reportIssuing,
		preview: renderPreview
	});
	const runner = await startRunner({ db, pool: databasePool(), jobs, log, concurrency });
	await beat(db, worker);
	const heart = setInterval(() => {
		beat(db, worker).catch((error: unknown) =>
			log.warn({ err: error }, 'the heartbeat could not be written')
		);
	}, heartbeatSeconds * 1000);
	const askForPurge = () => {
		enqueue(db, 'purge-deleted', {}, { oncePerSeconds: 3600 }).catch((error: unknown) =>
			log.warn({ err: error }, 'the hourly purge could not be asked for')
		);
	};
	askForPurge();
	const hourly = setInterval(askForPurge, 3_600_000);
	const askForReconciliation = () => {
		enqueue(db, 'billing-reconcile', {}, { oncePerSeconds: 86_400 }).catch((error: unknown) =>
			log.warn({ err: error }, 'the daily comparison with the payment service could not be asked for')
		);
	};
	askForReconciliation();
	const daily = setInterval(askForReconciliation, 3_600_000);
	log.info({ worker: worker.id, concurrency }, 'worker ready');

	let stopping = false;
	const stop = async (signal: string) => {
		if (stopping) return;
		stopping = true;
		log.info({ signal }, 'worker stopping');
		clearInterval(heart);
		clearInterval(hourly);
		clearInterval(daily);
		await runner.stop(graceMilliseconds);
		await signOff(db, worker.id).catch(() => undefined);
		await closeDatabase();
		log.info('worker stopped');
	};
	for (const signal of ['SIGTERM', 'SIGINT'] as const) {
		process.on(signal, () => {
			stop(signal).then(
				() => process.exit(0),
				(error: unknown) => {
					log.fatal({ err: error }, 'the worker could not stop in good order');
					process.exit(1);
				}
			);
		});
	}
}

main().catch((error: unknown) => {
	log.fatal({ err: error }, 'the worker could not start');
	process.exit(1);
});
