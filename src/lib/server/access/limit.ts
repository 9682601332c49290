import { createHash } from 'node:crypto';
import { isIPv6 } from 'node:net';
import { and, eq, gt, lt, sql } from 'drizzle-orm';
import { database, type Database } from '../db';
import { rateWindows } from '../db/schema';
import { TooManyRequestsError } from './errors';

/*
 * Fixed windows in the database, so that every web process counts together. Never call these inside a transaction:
 * a try that is rolled back would not have been counted.
 */

/** Keys may hold addresses of people; only their digest is stored. */
function stored(key: string): string {
	return createHash('sha256').update(key).digest('base64url');
}

/**
 * Counts one try under `key` and refuses it when the window already holds `max` of them.
 * Counting comes before the work, so tries sent in parallel cannot slip through together.
 * @param seconds length of the window
 * @throws TooManyRequestsError with the seconds until the window ends
 */
export async function limit(
	key: string,
	max: number,
	seconds: number,
	db: Database = database()
): Promise<void> {
	const start = sql`to_timestamp(floor(extract(epoch from now()) / ${seconds}) * ${seconds})`;
	const [row] = await db
		.insert(rateWindows)
		.values({ key: stored(key), windowStart: start, count: 1 })
		.onConflictDoUpdate({
			target: [rateWindows.key, rateWindows.windowStart],
			set: { count: sql`${rateWindows.count} + 1` }
		})
		.returning({
			count: rateWindows.count,
			left: sql<number>`ceil(${seconds} - extract(epoch from now() - ${rateWindows.windowStart}))::int`
		});
	if (row !== undefined && row.count > max) throw new TooManyRequestsError(Math.max(1, row.left));
}

/** Takes one counted try back: it turned out to be a rightful one. */
export async function giveBack(key: string, db: Database = database()): Promise<void> {
	const newest = db
		.select({ start: sql`max(${rateWindows.windowStart})` })
		.from(rateWindows)
		.where(eq(rateWindows.key, stored(key)));
	await db
		.update(rateWindows)
		.set({ count: sql`${rateWindows.count} - 1` })
		.where(
			and(eq(rateWindows.key, stored(key)), eq(rateWindows.windowStart, newest), gt(rateWindows.count, 0))
		);
}

/** Forgets every try under `key`. */
export async function forgive(key: string, db: Database = database()): Promise<void> {
	await db.delete(rateWindows).where(eq(rateWindows.key, stored(key)));
}

/** Drops windows that ended long ago; a housekeeping job calls it. */
export async function dropOldWindows(db: Database = database()): Promise<void> {
	await db.delete(rateWindows).where(lt(rateWindows.windowStart, sql`now() - interval '2 days'`));
}

/**
 * The part of a network address that counts as one source: an IPv4 address, or the /64 of an IPv6 one
 * (its holder chooses the rest freely).
 */
export function sourceOf(address: string): string {
	const plain = address.replace(/^::ffff:(?=\d+\.\d+\.\d+\.\d+$)/i, '').replace(/%.*$/, '');
	if (!isIPv6(plain)) return plain;
	const [head = '', tail] = plain.split('::');
	const left = head === '' ? [] : head.split(':');
	const right = tail === undefined || tail === '' ? [] : tail.split(':');
	const zeros = tail === undefined ? [] : Array<string>(8 - left.length - right.length).fill('0');
	const groups = [...left, ...zeros, ...right].slice(0, 4);
	return `${groups.map((group) => parseInt(group, 16).toString(16)).join(':')}::/64`;
}
