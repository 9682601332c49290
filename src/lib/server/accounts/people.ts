import { eq, sql } from 'drizzle-orm';
import type { Queryable } from '../db';
import { passwords, users } from '../db/schema';
import { normaliseEmail } from './email';
import { hashPassword } from './passwords';

export interface Account {
	id: string;
	name: string;
	email: string;
	confirmed: boolean;
	/** Undefined for somebody who has never set a password. */
	passwordHash: string | undefined;
}

const columns = {
	id: users.id,
	name: users.name,
	email: users.email,
	confirmed: sql<boolean>`${users.emailVerified} is not null`,
	passwordHash: passwords.hash
};

function account(row: Omit<Account, 'passwordHash'> & { passwordHash: string | null }): Account {
	return { ...row, passwordHash: row.passwordHash ?? undefined };
}

/** For the use cases of this folder only: what they return to a route is a `Person`. */
export async function findAccountByEmail(db: Queryable, email: string): Promise<Account | null> {
	const [row] = await db
		.select(columns)
		.from(users)
		.leftJoin(passwords, eq(passwords.userId, users.id))
		.where(eq(sql`lower(${users.email})`, normaliseEmail(email)));
	return row === undefined ? null : account(row);
}

export async function findAccountById(db: Queryable, id: string): Promise<Account | null> {
	const [row] = await db
		.select(columns)
		.from(users)
		.leftJoin(passwords, eq(passwords.userId, users.id))
		.where(eq(users.id, id));
	return row === undefined ? null : account(row);
}

export async function storePassword(db: Queryable, userId: string, hash: string): Promise<void> {
	await db
		.insert(passwords)
		.values({ userId, hash })
		.onConflictDoUpdate({ target: passwords.userId, set: { hash, changedAt: sql`now()` } });
}

/**
 * An account whose address counts as confirmed, without a mail: for demo data and tests.
 * @param demo marks the row as the demo's own
 * @returns the new person's id
 */
export async function createConfirmedAccount(
	db: Queryable,
	input: { name: string; email: string; password: string; demo?: string }
): Promise<string> {
	const [row] = await db
		.insert(users)
		.values({
			name: input.name,
			email: normaliseEmail(input.email),
			emailVerified: sql`now()`,
			demo: input.demo ?? null
		})
		.returning({ id: users.id });
	if (row === undefined) throw new Error('The account was not created.');
	await storePassword(db, row.id, await hashPassword(input.password));
	return row.id;
}
