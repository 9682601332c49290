import { hash as argon2 } from '@node-rs/argon2';
import { eq, sql } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { InvalidInputError, NotFoundError, TooManyRequestsError } from '../access/errors';
import type { Database } from '../db';
import { mailTokens, passwords, sessions, users } from '../db/schema';
import { closeMail, MailNotSentError } from '../mail/transport';
import { testDatabase } from '../testing/db';
import { setTestEnvironment } from '../testing/environment';
import { openMailbox, type Mailbox } from '../testing/mailbox';
import { testPassword, testPerson } from '../testing/people';
import { changeName, changePassword } from './own-account';
import { findReset, requestReset, resetPassword } from './reset-password';
import {
	closeAllSessions,
	closeSession,
	findSession,
	listSessions,
	openSession,
	revokeSession
} from './sessions';
import { checkCredentials, UnconfirmedAddressError } from './sign-in';
import { confirmAddress, dropUnconfirmed, findConfirmation, resendConfirmation, signUp } from './sign-up';
import { hashToken } from './tokens';

let db: Database;
let drop: () => Promise<void>;
let mailbox: Mailbox;

beforeAll(async () => {
	({ db, drop } = await testDatabase());
	mailbox = await openMailbox();
	setTestEnvironment({ SMTP_URL: mailbox.url, ORIGIN: 'https://noonmark.example' });
});
afterAll(async () => {
	closeMail();
	await mailbox.close();
	await drop();
});

let count = 0;
const freshAddress = () => `New.Person${++count}@Test.example`;
const freshSource = () => `198.51.100.${++count % 256}`;
const password = 'umbrella kettle voyage 9';

function newestMail(to: string) {
	return mailbox.mails.filter((mail) => JSON.stringify(mail.to).includes(to.toLowerCase())).at(-1);
}

function linkToken(to: string, page: 'confirm' | 'reset'): string {
	const found = new RegExp(`https://noonmark\\.example/${page}/([\\w-]{43})\\s`).exec(
		newestMail(to)?.text ?? ''
	);
	if (found?.[1] === undefined) throw new Error(`No ${page} link was sent to ${to}.`);
	return found[1];
}

async function startAccount(email = freshAddress()) {
	await signUp({ name: 'Rhea Aldous', email, password }, freshSource(), db);
	return { email, token: linkToken(email, 'confirm') };
}

describe('sign-up', () => {
	it('makes an account that counts once its address is confirmed, with an argon2id hash of the asked cost', async () => {
		const { email, token } = await startAccount();
		await expect(checkCredentials({ email, password }, freshSource(), db)).rejects.toThrow(
			UnconfirmedAddressError
		);
		expect(await findConfirmation(token, db)).toEqual({ email: email.toLowerCase() });
		await confirmAddress(token, password, freshSource(), db);
		const person = await checkCredentials({ email: email.toUpperCase(), password }, freshSource(), db);
		expect(person).toEqual({ id: person.id, name: 'Rhea Aldous', email: email.toLowerCase() });
		const [row] = await db.select().from(passwords).where(eq(passwords.userId, person.id));
		expect(row?.hash).toMatch(/^\$argon2id\$v=19\$m=19456,t=2,p=1\$/);
	});

	it('refuses a poor password by field', async () => {
		const attempt = signUp({ name: 'A', email: freshAddress(), password: 'short' }, freshSource(), db);
		await expect(attempt).rejects.toMatchObject({
			fields: { password: expect.stringMatching(/at least 15/) }
		});
	});

	it('stores a digest of the token and not the token', async () => {
		const { token } = await startAccount();
		const rows = await db
			.select()
			.from(mailTokens)
			.where(eq(mailTokens.tokenHash, hashToken(token)));
		expect(rows).toHaveLength(1);
		expect(await db.select().from(mailTokens).where(eq(mailTokens.tokenHash, token))).toHaveLength(0);
	});

	it('says the same for an address that has an account, and tells its owner', async () => {
		const person = await testPerson(db);
		const answer = await signUp({ name: 'Stranger', email: person.email, password }, freshSource(), db);
		expect(answer).toBeUndefined();
		expect(newestMail(person.email)?.subject).toBe('You already have a Noonmark account');
		expect(newestMail(person.email)?.text).not.toContain('Stranger');
		const [row] = await db.select().from(users).where(eq(users.id, person.id));
		expect(row?.name).toBe(person.name);
		await checkCredentials({ email: person.email, password: testPassword }, freshSource(), db);
	});

	it('takes a second sign-up before the first is confirmed; only its link and password work', async () => {
		const { email, token: first } = await startAccount();
		const other = 'harbour pencil lantern 4';
		await signUp({ name: 'Rhea', email, password: other }, freshSource(), db);
		const second = linkToken(email, 'confirm');
		await expect(confirmAddress(first, password, freshSource(), db)).rejects.toThrow(/used or is too old/);
		await expect(confirmAddress(second, password, freshSource(), db)).rejects.toThrow(/not the password/);
		await confirmAddress(second, other, freshSource(), db);
		await checkCredentials({ email, password: other }, freshSource(), db);
	});

	it('confirms once: of parallel uses of one link exactly one succeeds', async () => {
		const { token } = await startAccount();
		const uses = await Promise.allSettled(
			Array.from({ length: 8 }, () => confirmAddress(token, password, freshSource(), db))
		);
		expect(uses.filter((use) => use.status === 'fulfilled')).toHaveLength(1);
		await expect(confirmAddress(token, password, freshSource(), db)).rejects.toThrow(InvalidInputError);
	});

	it('does not confirm by an expired link, nor by one for another purpose', async () => {
		const { email, token } = await startAccount();
		await db
			.update(mailTokens)
			.set({ expires: sql`now() - interval '1 second'` })
			.where(eq(mailTokens.tokenHash, hashToken(token)));
		expect(await findConfirmation(token, db)).toBeNull();
		await expect(confirmAddress(token, password, freshSource(), db)).rejects.toThrow(/used or is too old/);
		await (
			await requestReset(email, freshSource(), db)
		).sending;
		const reset = linkToken(email, 'reset');
		await expect(confirmAddress(reset, password, freshSource(), db)).rejects.toThrow(/used or is too old/);
	});

	it('sends the confirmation again to who waits for it, and to nobody else', async () => {
		const { email, token } = await startAccount();
		await (
			await resendConfirmation(email, freshSource(), db)
		).sending;
		expect(linkToken(email, 'confirm')).not.toBe(token);
		const person = await testPerson(db);
		const before = mailbox.mails.length;
		await (
			await resendConfirmation(person.email, freshSource(), db)
		).sending;
		await (
			await resendConfirmation('nobody@test.example', freshSource(), db)
		).sending;
		expect(mailbox.mails).toHaveLength(before);
	});

	it('tries a mail twice, then says plainly that it was not sent', async () => {
		mailbox.refuse(1);
		await startAccount();
		const before = mailbox.refused();
		mailbox.refuse(2);
		const attempt = signUp({ name: 'A', email: freshAddress(), password }, freshSource(), db);
		await expect(attempt).rejects.toThrow(MailNotSentError);
		expect(mailbox.refused() - before).toBe(2);
	});

	it('lets nobody fill a mailbox', async () => {
		const email = freshAddress();
		for (let i = 0; i < 5; i++) await signUp({ name: 'A', email, password }, freshSource(), db);
		await expect(signUp({ name: 'A', email, password }, freshSource(), db)).rejects.toThrow(
			TooManyRequestsError
		);
	});

	it('forgets accounts that were never confirmed, and only those', async () => {
		const { email } = await startAccount();
		const person = await testPerson(db);
		await db.update(users).set({ createdAt: sql`now() - interval '8 days'` });
		await dropUnconfirmed(db);
		expect(await db.select().from(users).where(eq(users.email, email.toLowerCase()))).toHaveLength(0);
		expect(await db.select().from(users).where(eq(users.id, person.id))).toHaveLength(1);
	});
});

describe('sign-in', () => {
	it('says the same for an unknown address and a wrong password, after the same work', async () => {
		const person = await testPerson(db);
		const messages: unknown[] = [];
		const times = { known: [] as number[], unknown: [] as number[] };
		for (let i = 0; i < 8; i++) {
			for (const [kind, email] of [
				['known', person.email],
				['unknown', freshAddress()]
			] as const) {
				const start = performance.now();
				const cause: unknown = await checkCredentials({ email, password: 'wrong' }, freshSource(), db).catch(
					(thrown: unknown) => thrown
				);
				times[kind].push(performance.now() - start);
				messages.push(cause instanceof InvalidInputError ? cause.message : cause);
			}
		}
		expect(new Set(messages).size).toBe(1);
		const middle = (all: number[]) => [...all].sort((a, b) => a - b)[4] ?? 0;
		// Without the decoy the unknown address answers in a small part of the time that argon2 takes.
		expect(middle(times.unknown)).toBeGreaterThan(middle(times.known) / 2);
	});

	it('looks at the whole password, far beyond 72 bytes', async () => {
		const email = freshAddress();
		const long = `${'voyage kettle '.repeat(3)}umbrella harbour lantern pencil ${'x9'.repeat(4)}`;
		expect(Buffer.byteLength(long)).toBeGreaterThan(73);
		await signUp({ name: 'A', email, password: long }, freshSource(), db);
		await confirmAddress(linkToken(email, 'confirm'), long, freshSource(), db);
		const attempt = checkCredentials({ email, password: `${long.slice(0, -1)}8` }, freshSource(), db);
		await expect(attempt).rejects.toThrow(InvalidInputError);
		await checkCredentials({ email, password: long }, freshSource(), db);
	});

	it('throttles guesses from one source and never locks the owner out of another', async () => {
		const person = await testPerson(db);
		const attacker = freshSource();
		let throttled = 0;
		for (let i = 0; i < 200; i++) {
			const cause: unknown = await checkCredentials(
				{ email: person.email, password: `guess ${i}` },
				attacker,
				db
			).catch((thrown: unknown) => thrown);
			if (cause instanceof TooManyRequestsError) throttled++;
		}
		expect(throttled).toBeGreaterThanOrEqual(180);
		const right = { email: person.email, password: testPassword };
		await expect(checkCredentials(right, attacker, db)).rejects.toThrow(TooManyRequestsError);
		await checkCredentials(right, freshSource(), db);
	});

	it('replaces a hash of lower cost at the next sign-in', async () => {
		const person = await testPerson(db);
		const weak = await argon2(testPassword, { memoryCost: 8192, timeCost: 1, parallelism: 1 });
		await db.update(passwords).set({ hash: weak }).where(eq(passwords.userId, person.id));
		await checkCredentials({ email: person.email, password: testPassword }, freshSource(), db);
		const [row] = await db.select().from(passwords).where(eq(passwords.userId, person.id));
		expect(row?.hash).toContain('$m=19456,t=2,p=1$');
		await checkCredentials({ email: person.email, password: testPassword }, freshSource(), db);
	});
});

describe('reset', () => {
	it('sets a new password once, ends every session and tells the owner', async () => {
		const person = await testPerson(db);
		const session = await openSession(person.id, 'a browser', db);
		await (
			await requestReset(person.email, freshSource(), db)
		).sending;
		const token = linkToken(person.email, 'reset');
		expect(await findReset(token, db)).toEqual({ email: person.email });
		const next = 'harbour pencil lantern 4';
		const uses = await Promise.allSettled(
			Array.from({ length: 6 }, () => resetPassword(token, next, freshSource(), db))
		);
		const done = uses.filter((use) => use.status === 'fulfilled');
		expect(done).toHaveLength(1);
		await done[0]?.value.sending;
		expect(newestMail(person.email)?.subject).toBe('Your Noonmark password was changed');
		expect(await findSession(session, db)).toBeNull();
		await expect(
			checkCredentials({ email: person.email, password: testPassword }, freshSource(), db)
		).rejects.toThrow(InvalidInputError);
		await checkCredentials({ email: person.email, password: next }, freshSource(), db);
	});

	it('keeps the link when the new password is refused', async () => {
		const person = await testPerson(db);
		await (
			await requestReset(person.email, freshSource(), db)
		).sending;
		const token = linkToken(person.email, 'reset');
		await expect(resetPassword(token, 'short', freshSource(), db)).rejects.toThrow(/at least 15/);
		expect(await findReset(token, db)).not.toBeNull();
	});

	it('answers alike for an unknown address and sends nothing', async () => {
		const person = await testPerson(db);
		const before = mailbox.mails.length;
		const start = performance.now();
		const unknown = await requestReset('nobody@test.example', freshSource(), db);
		const middle = performance.now();
		const known = await requestReset(person.email, freshSource(), db);
		const end = performance.now();
		await Promise.all([unknown.sending, known.sending]);
		expect(mailbox.mails).toHaveLength(before + 1);
		expect(Math.abs(middle - start - (end - middle))).toBeLessThan(200);
	});

	it('sends at most three links an hour to one address, known or not', async () => {
		const person = await testPerson(db);
		for (const email of [person.email, freshAddress()]) {
			for (let i = 0; i < 3; i++) await (await requestReset(email, freshSource(), db)).sending;
			await expect(requestReset(email, freshSource(), db)).rejects.toThrow(TooManyRequestsError);
		}
	});
});

describe('sessions', () => {
	it('open by their token alone, of which only the digest is stored', async () => {
		const person = await testPerson(db);
		const token = await openSession(person.id, 'a browser', db);
		expect(Buffer.from(token, 'base64url')).toHaveLength(32);
		expect(await findSession(token, db)).toEqual(person);
		const [row] = await db.select().from(sessions).where(eq(sessions.userId, person.id));
		expect(row?.sessionToken).toBe(hashToken(token));
		expect(await findSession(row?.sessionToken ?? '', db)).toBeNull();
		await closeSession(token, db);
		expect(await findSession(token, db)).toBeNull();
	});

	it('end after their idle time, and are prolonged by use up to their absolute end', async () => {
		const person = await testPerson(db);
		const token = await openSession(person.id, '', db);
		const own = eq(sessions.sessionToken, hashToken(token));
		const daysLeft = async () => {
			const [row] = await db
				.select({ days: sql<number>`extract(epoch from ${sessions.expires} - now())::float / 86400` })
				.from(sessions)
				.where(own);
			return row?.days ?? Number.NaN;
		};
		expect(await daysLeft()).toBeCloseTo(14, 2);
		await db
			.update(sessions)
			.set({ lastSeenAt: sql`now() - interval '13 days'`, expires: sql`now() + interval '1 day'` })
			.where(own);
		await findSession(token, db);
		expect(await daysLeft()).toBeCloseTo(14, 2);
		await db
			.update(sessions)
			.set({ lastSeenAt: sql`now() - interval '2 hours'`, createdAt: sql`now() - interval '29 days'` })
			.where(own);
		await findSession(token, db);
		expect(await daysLeft()).toBeCloseTo(1, 2);
		await db
			.update(sessions)
			.set({ expires: sql`now() - interval '1 second'` })
			.where(own);
		expect(await findSession(token, db)).toBeNull();
		expect(await listSessions(person, null, db)).toEqual([]);
	});

	it('are listed and ended by their own person only', async () => {
		const [person, stranger] = [await testPerson(db), await testPerson(db)];
		const [here, there] = [
			await openSession(person.id, 'here', db),
			await openSession(person.id, 'there', db)
		];
		const list = await listSessions(person, hashToken(here), db);
		expect(list.map((one) => [one.userAgent, one.current]).sort()).toEqual([
			['here', true],
			['there', false]
		]);
		expect(await listSessions(stranger, null, db)).toEqual([]);
		await expect(revokeSession(stranger, hashToken(there), db)).rejects.toThrow(NotFoundError);
		expect(await findSession(there, db)).not.toBeNull();
		await revokeSession(person, hashToken(there), db);
		expect(await findSession(there, db)).toBeNull();
		const third = await openSession(person.id, '', db);
		await closeAllSessions(person.id, hashToken(here), db);
		expect(await findSession(third, db)).toBeNull();
		expect(await findSession(here, db)).not.toBeNull();
	});
});

describe('own account', () => {
	it('changes the password with the present one, keeps this session and ends the others', async () => {
		const person = await testPerson(db);
		const [here, there] = [await openSession(person.id, '', db), await openSession(person.id, '', db)];
		const next = 'harbour pencil lantern 4';
		const wrong = changePassword(person, { current: 'wrong', next }, hashToken(here), db);
		await expect(wrong).rejects.toMatchObject({ fields: { current: expect.any(String) } });
		const poor = changePassword(person, { current: testPassword, next: 'x' }, hashToken(here), db);
		await expect(poor).rejects.toMatchObject({ fields: { next: expect.any(String) } });
		await (
			await changePassword(person, { current: testPassword, next }, hashToken(here), db)
		).sending;
		expect(newestMail(person.email)?.subject).toBe('Your Noonmark password was changed');
		expect(await findSession(here, db)).not.toBeNull();
		expect(await findSession(there, db)).toBeNull();
		await checkCredentials({ email: person.email, password: next }, freshSource(), db);
	});

	it("changes the own name and nobody else's", async () => {
		const [person, other] = [await testPerson(db), await testPerson(db, 'Other')];
		await changeName(person, 'R. Aldous', db);
		const names = await db.select({ id: users.id, name: users.name }).from(users);
		expect(names.find((row) => row.id === person.id)?.name).toBe('R. Aldous');
		expect(names.find((row) => row.id === other.id)?.name).toBe('Other');
	});
});
