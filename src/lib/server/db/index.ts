import { drizzle, type NodePgDatabase } from 'drizzle-orm/node-postgres';
import pg from 'pg';
import { env } from '../env';
import * as schema from './schema';

export type Database = NodePgDatabase<typeof schema>;
export type Transaction = Parameters<Parameters<Database['transaction']>[0]>[0];
/** What a query takes: the database or a transaction in it. */
export type Queryable = Database | Transaction;

/** A pool of its own on a given address, for tests and scripts. */
export function openDatabase(url: string, max = 10): { db: Database; pool: pg.Pool } {
	const pool = new pg.Pool({ connectionString: url, max, application_name: 'noonmark' });
	// An idle connection that breaks must not end the process; the next query opens a new one.
	pool.on('error', () => undefined);
	return { db: drizzle(pool, { schema }), pool };
}

let opened: ReturnType<typeof openDatabase> | undefined;

function open(): ReturnType<typeof openDatabase> {
	if (opened === undefined) {
		opened = openDatabase(env().DATABASE_URL);
		// The web server says so once it has answered its last request; idle connections would keep it alive.
		process.once('sveltekit:shutdown', () => void closeDatabase());
	}
	return opened;
}

/** The process's one pool on DATABASE_URL, opened at first use. */
export function database(): Database {
	return open().db;
}

/** The pool under `database()`, for the job queue, which speaks SQL of its own. */
export function databasePool(): pg.Pool {
	return open().pool;
}

/** Ends the process's pool; the last act of a shutdown. */
export async function closeDatabase(): Promise<void> {
	const closing = opened;
	opened = undefined;
	await closing?.pool.end();
}
