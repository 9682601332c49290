import { closeDatabase, database, databasePool } from '../lib/server/db';
import { applyMigrations } from '../lib/server/db/migrate';
import { log } from '../lib/server/log';

try {
	await applyMigrations(database(), databasePool());
} catch (error) {
	log.fatal({ err: error }, 'the migrations could not be applied');
	process.exitCode = 1;
} finally {
	await closeDatabase();
}
