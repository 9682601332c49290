import { sql } from 'drizzle-orm';
import pino from 'pino';
import { openDatabase } from '../../db';
import { rateWindows } from '../../db/schema';
import { startRunner } from '../runner';
import { idleJobs } from './idle-jobs';

/*
 * A worker process for tests that kill or freeze it: takes one job, says "taken", and holds it until a line comes on
 * standard input; then it tries to finish and says "finished" or "refused".
 */
const { db, pool } = openDatabase(process.env.DATABASE_URL ?? '', 4);
const say = (line: string) => process.stdout.write(`${line}\n`);
const waiting = idleJobs({
	'compute-run': {
		async handle({ runId }, context) {
			say('taken');
			await new Promise((resolve) => process.stdin.once('data', resolve));
			await context
				.finish(async (tx) => {
					await tx.insert(rateWindows).values({ key: `held ${runId}`, windowStart: sql`now()`, count: 1 });
				})
				.then(
					() => say('finished'),
					(error: unknown) => say(`refused ${error instanceof Error ? error.name : String(error)}`)
				);
		},
		abandon: () => Promise.resolve()
	}
});
await startRunner({
	db,
	pool,
	jobs: waiting,
	log: pino({ level: 'silent' }),
	concurrency: 1,
	pollMilliseconds: 50
});
