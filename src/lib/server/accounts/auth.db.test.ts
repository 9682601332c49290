import { eq } from 'drizzle-orm';
import type { Cookies, RequestEvent } from '@sveltejs/kit';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { InvalidInputError, TooManyRequestsError } from '../access/errors';
import { closeDatabase, type Database } from '../db';
import { sessions, users } from '../db/schema';
import { testDatabase } from '../testing/db';
import { setTestEnvironment } from '../testing/environment';
import { testPassword, testPerson } from '../testing/people';
import { readSession, sessionCookie, signIn, signOut } from './auth';
import { listSessions, revokeSession } from './sessions';
import { hashToken } from './tokens';

let db: Database;
let drop: () => Promise<void>;

beforeAll(async () => {
	const test = await testDatabase();
	({ db, drop } = test);
	setTestEnvironment({ DATABASE_URL: test.url, ORIGIN: 'https://noonmark.example' });
});
afterAll(async () => {
	await closeDatabase();
	await drop();
});

type Jar = Map<string, { value: string; options: Parameters<Cookies['set']>[2] | undefined }>;

let count = 0;

/** One request of a browser with the given cookies, from a source of its own unless told otherwise. */
function request(
	jar: Jar,
	headers: Record<string, string> = {},
	source = `203.0.113.${++count}`
): RequestEvent {
	const cookies: Cookies = {
		get: (name) => jar.get(name)?.value,
		getAll: () => [...jar].map(([name, { value }]) => ({ name, value })),
		set: (name, value, options) => {
			if (value === '' || options.maxAge === 0) jar.delete(name);
			else jar.set(name, { value, options });
		},
		delete: (name) => void jar.delete(name),
		serialize: (name, value) => `${name}=${value}`
	};
	const cookie = [...jar].map(([name, { value }]) => `${name}=${value}`).join('; ');
	const event: Partial<RequestEvent> = {
		cookies,
		locals: {} as App.Locals,
		url: new URL('https://noonmark.example/sign-in'),
		request: new Request('https://noonmark.example/sign-in', {
			headers: { ...headers, ...(cookie === '' ? {} : { cookie }), 'user-agent': 'a browser of the test' }
		}),
		getClientAddress: () => source
	};
	return event as RequestEvent;
}

describe('signing in by Auth.js', () => {
	it('sets one cookie that scripts, other sites and plain http cannot have, and reads it back', async () => {
		const person = await testPerson(db);
		const jar: Jar = new Map();
		await signIn(request(jar), { email: person.email, password: testPassword });
		expect([...jar.keys()]).toEqual(['__Host-noonmark-session']);
		const cookie = jar.get(sessionCookie());
		expect(cookie?.options).toMatchObject({ httpOnly: true, secure: true, sameSite: 'lax', path: '/' });
		expect(cookie?.options).not.toHaveProperty('domain');
		const read = await readSession(request(jar));
		expect(read).toEqual({ person, sessionId: hashToken(cookie?.value ?? '') });
		const [own] = await listSessions(person, read?.sessionId ?? null, db);
		expect(own).toMatchObject({ current: true, userAgent: 'a browser of the test' });
	});

	it('lets nothing but id, name and address into the session', async () => {
		const person = await testPerson(db);
		const jar: Jar = new Map();
		await signIn(request(jar), { email: person.email, password: testPassword });
		const event = request(jar);
		await readSession(event);
		const session = await event.locals.auth();
		expect(session?.user).toEqual({ id: person.id, name: person.name, email: person.email });
		expect(Object.keys(session ?? {}).sort()).toEqual(['expires', 'user']);
		expect(JSON.stringify(session)).not.toContain(jar.get(sessionCookie())?.value);
	});

	it('gives each sign-in a token of its own and ends the one before', async () => {
		const person = await testPerson(db);
		const jar: Jar = new Map();
		await signIn(request(jar), { email: person.email, password: testPassword });
		const before: Jar = new Map(jar);
		await signIn(request(jar), { email: person.email, password: testPassword });
		expect(jar.get(sessionCookie())?.value).not.toBe(before.get(sessionCookie())?.value);
		expect(await readSession(request(before))).toBeNull();
		expect(await readSession(request(jar))).not.toBeNull();
	});

	it('adopts no token that was planted', async () => {
		const person = await testPerson(db);
		const planted = 'A'.repeat(43);
		const jar: Jar = new Map([[sessionCookie(), { value: planted, options: undefined }]]);
		expect(await readSession(request(jar))).toBeNull();
		jar.set(sessionCookie(), { value: planted, options: undefined });
		await signIn(request(jar), { email: person.email, password: testPassword });
		expect(jar.get(sessionCookie())?.value).not.toBe(planted);
	});

	it('refuses wrong passwords in our own words, and throttles them', async () => {
		const person = await testPerson(db);
		const jar: Jar = new Map();
		const source = '198.51.100.9';
		for (let i = 0; i < 10; i++) {
			const attempt = signIn(request(jar, {}, source), { email: person.email, password: 'wrong' });
			await expect(attempt).rejects.toThrow(InvalidInputError);
		}
		const attempt = signIn(request(jar, {}, source), { email: person.email, password: testPassword });
		await expect(attempt).rejects.toThrow(TooManyRequestsError);
		expect(jar.size).toBe(0);
	});

	it('ends with signing out, with revoking and with the account', async () => {
		const person = await testPerson(db);
		const jars: Jar[] = [new Map(), new Map(), new Map()];
		for (const jar of jars) await signIn(request(jar), { email: person.email, password: testPassword });
		const [first, second, third] = jars.map((jar) => new Map(jar));
		if (!first || !second || !third) throw new Error('Three sessions are needed.');
		await signOut(request(new Map(first)));
		expect(await readSession(request(new Map(first)))).toBeNull();
		await revokeSession(person, hashToken(second.get(sessionCookie())?.value ?? ''), db);
		expect(await readSession(request(new Map(second)))).toBeNull();
		expect(await readSession(request(new Map(third)))).not.toBeNull();
		await db.delete(users).where(eq(users.id, person.id));
		expect(await readSession(request(new Map(third)))).toBeNull();
		expect(await db.select().from(sessions).where(eq(sessions.userId, person.id))).toEqual([]);
	});

	it('takes no host from the request', async () => {
		const person = await testPerson(db);
		const jar: Jar = new Map();
		const headers = { 'x-forwarded-host': 'evil.example', host: 'a b' };
		await signIn(request(jar, headers), { email: person.email, password: testPassword });
		expect(await readSession(request(jar, headers))).toMatchObject({ person });
	});

	it('signs nobody out while the database is away', async () => {
		const person = await testPerson(db);
		const jar: Jar = new Map();
		await signIn(request(jar), { email: person.email, password: testPassword });
		await db.execute('alter table sessions rename to sessions_away');
		try {
			await expect(readSession(request(new Map(jar)))).rejects.toThrow();
		} finally {
			await db.execute('alter table sessions_away rename to sessions');
		}
		expect(await readSession(request(jar))).toMatchObject({ person });
	});
});
