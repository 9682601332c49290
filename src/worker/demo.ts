import { z } from 'zod';
import { closeDatabase, database } from '../lib/server/db';
import { loadDemo } from '../lib/server/demo/load';
import { env } from '../lib/server/env';
import { log } from '../lib/server/log';

/* Loads the demo and prints its sign-ins as one line of JSON, the last on standard output. */
try {
	if (env().NOONMARK_MODE !== 'development') throw new Error('The demo is loaded in development only.');
	const password = z.string().min(15).parse(process.env.DEMO_PASSWORD);
	const { signIns } = await loadDemo(database(), password);
	process.stdout.write(`${JSON.stringify({ signIns })}\n`);
} catch (error) {
	log.fatal({ err: error }, 'the demo could not be loaded');
	process.exitCode = 1;
} finally {
	await closeDatabase();
}
