import { openDatabase } from '../lib/server/db';
import { applyMigrations } from '../lib/server/db/migrate';
import { log } from '../lib/server/log';

/* Needs DATABASE_URL alone, so that it can run where the service's other secrets are not. */
const url = process.env.DATABASE_URL;
if (url === undefined || url === '') {
	log.fatal('Set DATABASE_URL to the database whose tables are to be brought up to date.');
	process.exitCode = 1;
} else {
	const { db, pool } = openDatabase(url);
	try {
		await applyMigrations(db, pool);
	} catch (error) {
		log.fatal({ err: error }, 'the migrations could not be applied');
		process.exitCode = 1;
	} finally {
		await pool.end();
	}
}
