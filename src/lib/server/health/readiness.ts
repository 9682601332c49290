import { sql } from 'drizzle-orm';
import { database, type Database } from '../db';
import { migrationsAreCurrent } from '../db/migrate';
import { log } from '../log';
import { countLiveWorkers } from './heartbeat';

export type PartState = 'ok' | 'failing';

export interface Readiness {
	ready: boolean;
	parts: {
		/** The database answers. */
		database: PartState;
		/** Its tables are those of this version. */
		migrations: PartState;
		/** At least one worker process is alive to take jobs. */
		queue: PartState;
	};
}

const patienceMilliseconds = 3000;

/**
 * Whether the service can do its work now. Never throws and never waits longer than a few seconds; what went wrong
 * goes to the log, not into the answer.
 */
export async function checkReadiness(db: () => Database = database): Promise<Readiness> {
	const parts: Readiness['parts'] = { database: 'failing', migrations: 'failing', queue: 'failing' };
	const look = async () => {
		const connected = db();
		await connected.execute(sql`select 1`);
		parts.database = 'ok';
		if (!(await migrationsAreCurrent(connected))) return;
		parts.migrations = 'ok';
		if ((await countLiveWorkers(connected)) > 0) parts.queue = 'ok';
	};
	let timer: NodeJS.Timeout | undefined;
	const tooLong = new Promise<never>((_resolve, reject) => {
		timer = setTimeout(
			() => reject(new Error('The database does not answer in time.')),
			patienceMilliseconds
		);
	});
	const looking = look();
	try {
		await Promise.race([looking, tooLong]);
	} catch (error) {
		log.warn({ err: error }, 'not ready');
	} finally {
		clearTimeout(timer);
	}
	// A copy: an answer that comes late must not change what was said.
	return { ready: Object.values(parts).every((part) => part === 'ok'), parts: { ...parts } };
}
