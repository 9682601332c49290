import { and, desc, eq, gt, lt, ne, sql } from 'drizzle-orm';
import { NotFoundError } from '../access/errors';
import { database, type Queryable } from '../db';
import { sessions, users } from '../db/schema';
import type { Person } from './person';
import { hashToken, newToken } from './tokens';

/** A session ends this long after its last use ... */
export const idleDays = 14;
/** ... and this long after its start, however much it is used. */
export const absoluteDays = 30;

export interface OwnSession {
	/** Digest of the token: names the session, opens nothing. */
	id: string;
	createdAt: Date;
	lastSeenAt: Date;
	expires: Date;
	userAgent: string;
	current: boolean;
}

const nextExpiry = sql`least(now() + make_interval(days => ${idleDays}),
	${sessions.createdAt} + make_interval(days => ${absoluteDays}))`;

/**
 * Opens a session.
 * @param userAgent as the browser calls itself; only for the person's own list
 * @returns the token for the cookie; the database keeps its digest alone
 */
export async function openSession(
	userId: string,
	userAgent: string,
	db: Queryable = database()
): Promise<string> {
	const token = newToken();
	await db.insert(sessions).values({
		sessionToken: hashToken(token),
		userId,
		userAgent: userAgent.slice(0, 300),
		expires: sql`now() + make_interval(days => ${idleDays})`
	});
	return token;
}

/** The person whose live session the token opens, or null. Prolongs the session, at most once an hour. */
export async function findSession(token: string, db: Queryable = database()): Promise<Person | null> {
	const id = hashToken(token);
	const [row] = await db
		.select({
			id: users.id,
			name: users.name,
			email: users.email,
			stale: sql<boolean>`${sessions.lastSeenAt} < now() - interval '1 hour'`
		})
		.from(sessions)
		.innerJoin(users, eq(users.id, sessions.userId))
		.where(and(eq(sessions.sessionToken, id), gt(sessions.expires, sql`now()`)));
	if (row === undefined) return null;
	if (row.stale) {
		await db
			.update(sessions)
			.set({ lastSeenAt: sql`now()`, expires: nextExpiry })
			.where(eq(sessions.sessionToken, id));
	}
	return { id: row.id, name: row.name, email: row.email };
}

/** Ends the session that the token opens; nothing happens when there is none. */
export async function closeSession(token: string, db: Queryable = database()): Promise<void> {
	await db.delete(sessions).where(eq(sessions.sessionToken, hashToken(token)));
}

/** Ends all of a person's sessions, except the named one if given. */
export async function closeAllSessions(
	userId: string,
	exceptId: string | null,
	db: Queryable = database()
): Promise<void> {
	await db
		.delete(sessions)
		.where(
			and(eq(sessions.userId, userId), exceptId === null ? undefined : ne(sessions.sessionToken, exceptId))
		);
}

/** A person's own live sessions, the last used first. */
export async function listSessions(
	person: Person,
	currentId: string | null,
	db: Queryable = database()
): Promise<OwnSession[]> {
	const rows = await db
		.select()
		.from(sessions)
		.where(and(eq(sessions.userId, person.id), gt(sessions.expires, sql`now()`)))
		.orderBy(desc(sessions.lastSeenAt));
	return rows.map((row) => ({
		id: row.sessionToken,
		createdAt: row.createdAt,
		lastSeenAt: row.lastSeenAt,
		expires: row.expires,
		userAgent: row.userAgent ?? '',
		current: row.sessionToken === currentId
	}));
}

/**
 * Ends one of a person's own sessions.
 * @throws NotFoundError when it is nobody's or somebody else's
 */
export async function revokeSession(person: Person, id: string, db: Queryable = database()): Promise<void> {
	const gone = await db
		.delete(sessions)
		.where(and(eq(sessions.sessionToken, id), eq(sessions.userId, person.id)))
		.returning({ id: sessions.sessionToken });
	if (gone.length === 0) throw new NotFoundError('session');
}

/** Drops sessions that have ended; a housekeeping job calls it. */
export async function dropEndedSessions(db: Queryable = database()): Promise<void> {
	await db.delete(sessions).where(lt(sessions.expires, sql`now()`));
}
