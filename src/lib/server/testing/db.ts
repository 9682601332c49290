import { randomBytes } from 'node:crypto';
import { setTimeout as sleep } from 'node:timers/promises';
import pg from 'pg';
import { openDatabase, type Database } from '../db';
import { applyMigrations } from '../db/migrate';

/**
 * A fresh, migrated database on the test cluster (TEST_DATABASE_URL, a role that may create databases).
 * @returns the database, its address and `drop`, which closes the pool and removes it.
 */
export async function testDatabase(): Promise<{ db: Database; url: string; drop: () => Promise<void> }> {
	const server = process.env.TEST_DATABASE_URL;
	if (server === undefined) throw new Error('TEST_DATABASE_URL is not set; run the tests by `npm test`.');
	const name = `t_${randomBytes(6).toString('hex')}`;
	const admin = new pg.Client({ connectionString: server });
	await admin.connect();
	await admin.query(`create database ${name}`);
	const url = new URL(server);
	url.pathname = `/${name}`;
	const { db, pool } = openDatabase(url.href, 20);
	await applyMigrations(db, pool);
	return {
		db,
		url: url.href,
		drop: async () => {
			await pool.end();
			await dropDatabase(admin, name);
			await admin.end();
		}
	};
}

/**
 * A plain drop waits for the server's own vacuuming, which a role like the tests' may not end by force; force is for
 * connections that a killed process left behind. Whichever of both is there, the next try finds it gone.
 */
async function dropDatabase(admin: pg.Client, name: string): Promise<void> {
	for (let tries = 1; ; tries++) {
		try {
			await admin.query(`drop database ${name}${tries % 2 === 1 ? '' : ' with (force)'}`);
			return;
		} catch (cause) {
			if (tries === 8) throw cause;
			await sleep(250);
		}
	}
}
