import { resolve } from 'node:path';
import { sql } from 'drizzle-orm';
import { migrate } from 'drizzle-orm/node-postgres/migrator';
import type pg from 'pg';
import journal from '../../../../drizzle/meta/_journal.json';
import { installQueues } from '../jobs/install';
import type { Database } from './index';

/** Any number that no other use of advisory locks in this database has. */
const migrationLock = 7_319_402_117;

/**
 * Brings the tables and the job queues up to this version. Several processes may call it at once: one works, the
 * others wait and find nothing left to do.
 * @param folder where the migration files are; `drizzle` below the working directory unless given.
 */
export async function applyMigrations(
	db: Database,
	pool: pg.Pool,
	folder = resolve('drizzle')
): Promise<void> {
	const holder = await pool.connect();
	try {
		await holder.query('select pg_advisory_lock($1)', [migrationLock]);
		await migrate(db, { migrationsFolder: folder });
		await installQueues(pool);
	} finally {
		// Ending the connection gives the lock back, whatever state it is in.
		holder.release(true);
	}
}

/** The newest migration that this build knows, as its bookkeeping number. */
export const newestMigration = Math.max(...journal.entries.map((entry) => entry.when));

/** @returns whether every migration that this build knows has been applied. */
export async function migrationsAreCurrent(db: Database): Promise<boolean> {
	const { rows } = await db.execute<{ table: string | null }>(
		sql`select to_regclass('drizzle.__drizzle_migrations')::text as table`
	);
	if (rows[0]?.table == null) return false;
	const { rows: newest } = await db.execute<{ at: string | null }>(
		sql`select max(created_at)::text as at from drizzle.__drizzle_migrations`
	);
	return Number(newest[0]?.at ?? 0) >= newestMigration;
}
