import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Database } from '../db';
import { rateWindows } from '../db/schema';
import { testDatabase } from '../testing/db';
import { TooManyRequestsError } from './errors';
import { forgive, giveBack, limit } from './limit';

let db: Database;
let drop: () => Promise<void>;

beforeAll(async () => {
	({ db, drop } = await testDatabase());
});
afterAll(() => drop());

/* Windows are a year long here, so that no test straddles two of them. */
const year = 31_536_000;

describe('limit', () => {
	it('lets exactly the allowed number of parallel tries through', async () => {
		const tries = await Promise.allSettled(Array.from({ length: 50 }, () => limit('parallel', 7, year, db)));
		expect(tries.filter((one) => one.status === 'fulfilled')).toHaveLength(7);
		for (const one of tries) {
			if (one.status === 'rejected') expect(one.reason).toBeInstanceOf(TooManyRequestsError);
		}
	});

	it('says when to come back, and counts keys apart', async () => {
		await limit('a', 1, year, db);
		await limit('b', 1, year, db);
		const refused: unknown = await limit('a', 1, year, db).catch((cause: unknown) => cause);
		expect(refused).toBeInstanceOf(TooManyRequestsError);
		if (refused instanceof TooManyRequestsError) {
			expect(refused.retryAfter).toBeGreaterThan(0);
			expect(refused.retryAfter).toBeLessThanOrEqual(year);
		}
	});

	it('gives a try back and forgives all', async () => {
		await limit('c', 1, year, db);
		await giveBack('c', db);
		await limit('c', 1, year, db);
		await expect(limit('c', 1, year, db)).rejects.toThrow(TooManyRequestsError);
		await forgive('c', db);
		await limit('c', 1, year, db);
	});

	it('starts anew in the next window', async () => {
		await limit('d', 1, 1, db);
		await new Promise((resolve) => setTimeout(resolve, 1100));
		await limit('d', 1, 1, db);
	});

	it('keeps no address in the database', async () => {
		await limit('sign-in:somebody@test.example', 1, year, db);
		const rows = await db.select().from(rateWindows);
		expect(rows.length).toBeGreaterThan(0);
		expect(JSON.stringify(rows)).not.toContain('somebody');
	});
});
