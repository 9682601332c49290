import { eq, sql } from 'drizzle-orm';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { hashToken } from '../accounts/tokens';
import {
	ConflictError,
	ForbiddenError,
	GoneError,
	InvalidInputError,
	NotFoundError,
	TooManyRequestsError
} from '../access/errors';
import { forgive } from '../access/limit';
import type { Membership } from '../access/membership';
import type { Database } from '../db';
import { auditEvents, dossiers, issues, organisations, reports, shareLinks } from '../db/schema';
import { testDatabase } from '../testing/db';
import { setTestEnvironment } from '../testing/environment';
import { member } from '../testing/members';
import { createShareLink, listShareLinks, revokeShareLink } from './links';
import { openShared, sharedPdf, sharedRecord } from './open';
import { issuedReport, sampleModel, type IssuedReport } from './testing/issued-report';
import { mostTrials } from './verdict';

let db: Database;
let drop: () => Promise<void>;
let author: Membership;
let stranger: Membership;
let issued: IssuedReport;

beforeAll(async () => {
	setTestEnvironment();
	({ db, drop } = await testDatabase());
	author = await member(db, ['author']);
	stranger = await member(db, ['owner', 'author']);
	issued = await issuedReport(db, author);
});
// Each test makes links as if it were the first.
beforeEach(() => forgive(`share-link:${author.userId}`, db));
afterAll(() => drop());

const tokenIn = (address: string) => address.split('/shared/')[1] ?? '';

async function link(expiresInDays: number | null = 30, reportId = issued.reportId, who = author) {
	const { id, address } = await createShareLink(who, reportId, { recipient: 'S. Perrin', expiresInDays }, db);
	return { id, address, token: tokenIn(address) };
}

let visitors = 0;
/** Each reader at an address of their own, unless the pace is what is tested. */
const visitor = () => `198.51.100.${++visitors}`;
const open = (token: string, counted = true) => openShared(token, { address: visitor(), counted }, db);
const row = async (id: string) => {
	const [found] = await db.select().from(shareLinks).where(eq(shareLinks.id, id));
	if (found === undefined) throw new Error('no such link');
	return found;
};

describe('a link', () => {
	it('has 256 random bits at the configured origin, of which the database holds the digest alone', async () => {
		const { id, address, token } = await link();
		expect(address).toMatch(/^https:\/\/noonmark\.example\/shared\/[A-Za-z0-9_-]{43}$/);
		const stored = await row(id);
		expect(stored.tokenHash).toBe(hashToken(token));
		const { rows } = await db.execute(
			sql`select (select json_agg(l) from share_links l)::text || (select json_agg(a) from audit_events a)::text as text`
		);
		expect(String(rows[0]?.text)).toContain(id);
		expect(String(rows[0]?.text)).not.toContain(token);
		const other = await link();
		expect(other.token).not.toBe(token);
	});

	it('leaves entries of its making and its end in the trail', async () => {
		const { id } = await link(90);
		await revokeShareLink(author, id, db);
		await revokeShareLink(author, id, db);
		const trail = await db.select().from(auditEvents).where(eq(auditEvents.subject, issued.reportId));
		const own = trail.filter(({ detail }) => (detail as { link: string }).link === id);
		expect(own.map(({ action, userId }) => [action, userId]).sort()).toEqual([
			['share-link.create', author.userId],
			['share-link.revoke', author.userId]
		]);
		expect(own.find(({ action }) => action === 'share-link.create')?.detail).toMatchObject({
			issue: issued.issueId,
			expiresInDays: 90
		});
	});

	it('is made for a recipient and at most a year, or for good', async () => {
		for (const given of [
			{ recipient: ' ', expiresInDays: 30 },
			{ recipient: 'x'.repeat(121), expiresInDays: 30 },
			{ recipient: 'A', expiresInDays: 0 },
			{ recipient: 'A', expiresInDays: 366 },
			{ recipient: 'A', expiresInDays: 1.5 }
		]) {
			await expect(createShareLink(author, issued.reportId, given, db)).rejects.toThrow(InvalidInputError);
		}
		expect((await row((await link(null)).id)).expiresAt).toBeNull();
		const { id } = await link(365);
		const [{ days } = { days: 0 }] = (
			await db.execute<{ days: number }>(
				sql`select extract(day from expires_at - created_at)::int as days from share_links where id = ${id}`
			)
		).rows;
		expect(days).toBe(365);
	});

	it('is refused to a report that is not issued', async () => {
		const other = await issuedReport(db, author);
		const states = ['draft', 'in-review', 'returned', 'approved', 'superseded', 'withdrawn'] as const;
		for (const state of states) {
			await db.update(reports).set({ state }).where(eq(reports.id, other.reportId));
			await expect(link(30, other.reportId), state).rejects.toThrow(ConflictError);
		}
		await db.update(reports).set({ state: 'issued' }).where(eq(reports.id, other.reportId));
		await db.update(issues).set({ state: 'signing' }).where(eq(issues.id, other.issueId));
		await expect(link(30, other.reportId)).rejects.toThrow(/not signed yet/);
	});

	it('is made, listed and revoked by owners and authors alone, and is nothing to another organisation', async () => {
		const { id, token } = await link();
		const acts: ((who: Membership | null) => Promise<unknown>)[] = [
			(who) => createShareLink(who, issued.reportId, { recipient: 'A', expiresInDays: 30 }, db),
			(who) => listShareLinks(who, issued.reportId, db),
			(who) => revokeShareLink(who, id, db)
		];
		const guest: Membership = { ...author, roles: ['guest'], onlyDossiers: [issued.dossierId] };
		const outside: Membership = { ...author, onlyDossiers: [] };
		for (const act of acts) {
			for (const who of [stranger, null, { ...author, roles: ['billing' as const] }, outside])
				await expect(act(who)).rejects.toThrow(NotFoundError);
			for (const who of [
				guest,
				{ ...author, roles: ['reader' as const] },
				{ ...author, roles: ['reviewer' as const] }
			])
				await expect(act(who)).rejects.toThrow(ForbiddenError);
		}
		expect((await open(token)).reading.number).toBe(issued.model.number);
		const owner = await member(db, ['owner'], author);
		expect(await revokeShareLink(owner, id, db)).toBe('S. Perrin');
	});

	it('is listed with who made it and how it was used, without anything that opens it', async () => {
		const other = await issuedReport(db, author);
		const first = await link(30, other.reportId);
		const second = await link(null, other.reportId);
		await open(first.token);
		await open(first.token);
		await revokeShareLink(author, second.id, db);
		const listed = await listShareLinks(author, other.reportId, db);
		expect(listed.map(({ id, state, openings }) => [id, state, openings])).toEqual([
			[second.id, 'revoked', 0],
			[first.id, 'open', 2]
		]);
		expect(listed[1]?.lastOpenedAt).toBeInstanceOf(Date);
		expect(listed[0]?.madeBy).toMatch(/^Person /);
		expect(JSON.stringify(listed)).not.toContain(hashToken(first.token));
	});

	it('is made at a pace', async () => {
		const hasty = await member(db, ['author'], author);
		const given = { recipient: 'A', expiresInDays: 30 };
		const tries = await Promise.allSettled(
			Array.from({ length: 61 }, () => createShareLink(hasty, issued.reportId, given, db))
		);
		const refused = tries.filter((one) => one.status === 'rejected');
		expect(refused.length).toBeGreaterThan(0);
		expect(refused.every(({ reason }) => reason instanceof TooManyRequestsError)).toBe(true);
	});
});

describe('a reader', () => {
	it('sees the issue as frozen, the verdict of now, and both files byte for byte', async () => {
		const { id, token } = await link();
		await db
			.update(reports)
			.set({ title: 'Changed later', text: { ...issued.model.text, question: 'Another?' } })
			.where(eq(reports.id, issued.reportId));
		const { reading, verdict, files } = await open(token);
		expect(reading).toMatchObject({
			title: issued.model.title,
			question: issued.model.text.question,
			organisation: { name: issued.model.organisation.name, contact: issued.model.organisation.contact }
		});
		expect(verdict).toMatchObject({ heading: 'Genuine and unchanged.', good: true, recomputed: true });
		expect(verdict.rows.find((one) => one.id === 'record')?.text).toMatch(/^(\d+) of \1 figures equal/);
		expect(Date.now() - verdict.checkedAt.getTime()).toBeLessThan(60 * 60_000);

		const { name, pdf } = await sharedPdf(token, visitor(), db);
		expect(pdf.equals(issued.pdf)).toBe(true);
		expect(name).toBe(`${issued.model.number}-r1.pdf`);
		expect(files.pdf).toEqual({ name, size: pdf.length });
		const { record } = await sharedRecord(token, visitor(), db);
		expect(files.record?.size).toBe(record.length);
		expect(JSON.parse(record.toString('utf8'))).toMatchObject({
			format: 'noonmark-record/1',
			report: { number: issued.model.number, revision: 1, code: issued.model.verification?.code }
		});
		expect((await row(id)).openings).toBe(1);
		expect(JSON.stringify(reading)).not.toMatch(/"request":|"result":/);
	});

	it('is counted when reading, not when a program only asks for the head or a file', async () => {
		const { id, token } = await link();
		await open(token, false);
		await sharedPdf(token, visitor(), db);
		await sharedRecord(token, visitor(), db);
		expect(await row(id)).toMatchObject({ openings: 0, lastOpenedAt: null });
		await Promise.all(Array.from({ length: 8 }, () => open(token)));
		expect((await row(id)).openings).toBe(8);
	});

	it('is told that a link has ended, by the database’s clock, and nothing of the report', async () => {
		const revoked = await link();
		const runOut = await link();
		await open(revoked.token);
		await revokeShareLink(author, revoked.id, db);
		await db
			.update(shareLinks)
			.set({ expiresAt: sql`now() + interval '1 hour'` })
			.where(eq(shareLinks.id, runOut.id));
		await open(runOut.token);
		await db
			.update(shareLinks)
			.set({ expiresAt: sql`now() - interval '1 millisecond'` })
			.where(eq(shareLinks.id, runOut.id));
		const listed = await listShareLinks(author, issued.reportId, db);
		expect(listed.find(({ id }) => id === runOut.id)?.state).toBe('run-out');
		for (const { token } of [revoked, runOut]) {
			for (const ask of [
				() => open(token),
				() => sharedPdf(token, visitor(), db),
				() => sharedRecord(token, visitor(), db)
			]) {
				const refusal = await ask().catch((thrown: unknown) => thrown);
				expect(refusal).toBeInstanceOf(GoneError);
				expect((refusal as Error).message).toBe(
					'It has run out or was taken back. Ask whoever sent it to you for a new one.'
				);
			}
		}
		expect((await row(revoked.id)).openings).toBe(1);
	});

	it('finds nothing by a guess, a digest or a piece of a token', async () => {
		const { token } = await link();
		const guesses = [
			'',
			'x',
			'x'.repeat(43),
			hashToken(token),
			token.slice(0, -1),
			`${token}=`,
			token.toLowerCase() === token ? token.toUpperCase() : token.toLowerCase(),
			'../reports',
			'\0',
			'x'.repeat(10_000)
		];
		for (const guess of guesses) await expect(open(guess)).rejects.toThrow(NotFoundError);
		await expect(sharedPdf(hashToken(token), visitor(), db)).rejects.toThrow(NotFoundError);
	});

	it('sees one revision only, and on it that it was replaced or withdrawn', async () => {
		const first = await issuedReport(db, author, { number: 'TB-7000' });
		const { token } = await link(30, first.reportId);
		const second = await issuedReport(db, author, { number: 'TB-7000', revision: 2 });
		await db.update(reports).set({ state: 'superseded' }).where(eq(reports.id, first.reportId));
		const { reading, verdict } = await open(token);
		expect(reading.revision).toBe(1);
		expect(verdict.heading).toBe('Genuine and unchanged, but replaced by revision 2.');
		expect(verdict).toMatchObject({
			good: false,
			known: { state: 'superseded', replacedBy: { revision: 2 } }
		});
		expect((await sharedPdf(token, visitor(), db)).pdf.equals(first.pdf)).toBe(true);
		await db.update(reports).set({ state: 'withdrawn' }).where(eq(reports.id, first.reportId));
		expect((await open(token)).verdict).toMatchObject({ good: false, known: { state: 'withdrawn' } });
		expect(second.pdf.equals(first.pdf)).toBe(false);
	});

	it('is told where the stored bytes are no longer those that were signed', async () => {
		const other = await issuedReport(db, author);
		const { token } = await link(30, other.reportId);
		expect((await open(token)).verdict.good).toBe(true);
		const altered = Buffer.from(other.pdf);
		const at = altered.indexOf('stream', 2000) + 40;
		altered[at] = (altered[at] ?? 0) ^ 1;
		await db.update(issues).set({ pdf: altered }).where(eq(issues.id, other.issueId));
		const { verdict } = await open(token);
		expect(verdict).toMatchObject({ good: false, recomputed: false, known: null });
		expect(verdict.heading).toMatch(/^Altered/);
	});

	it('of a long record is told what was not computed again, without waiting for it', async () => {
		const model = await sampleModel('TB-9000', 1, 'value', mostTrials + 1);
		const { reportId } = await issuedReport(db, author, { number: 'TB-9000', model });
		const { token } = await link(30, reportId);
		const { verdict } = await open(token);
		expect(verdict).toMatchObject({ heading: 'Genuine and unchanged.', good: true, recomputed: false });
		expect(verdict.rows.find((one) => one.id === 'record')?.lead).toBe('not recomputed');
		expect(verdict.reasons.join(' ')).toMatch(/more than are computed here; use the command instead/);
	});

	it('finds nothing of a deleted dossier, report or organisation', async () => {
		const other = await member(db, ['author']);
		const { reportId, dossierId } = await issuedReport(db, other);
		const { token } = await link(30, reportId, other);
		await open(token);
		await db.update(dossiers).set({ deletedAt: new Date() }).where(eq(dossiers.id, dossierId));
		await expect(open(token)).rejects.toThrow(NotFoundError);
		await db.update(dossiers).set({ deletedAt: null }).where(eq(dossiers.id, dossierId));
		await db.update(reports).set({ deletedAt: new Date() }).where(eq(reports.id, reportId));
		await expect(open(token)).rejects.toThrow(NotFoundError);
		await db.update(reports).set({ deletedAt: null }).where(eq(reports.id, reportId));
		await open(token);
		await db.delete(organisations).where(eq(organisations.id, other.organisationId));
		await expect(open(token)).rejects.toThrow(NotFoundError);
	});

	it('who tries many addresses is slowed down, and others are not', async () => {
		const { token } = await link();
		const guesser = '203.0.113.9';
		const tries = await Promise.allSettled(
			Array.from({ length: 481 }, (_, i) => sharedPdf(`guess-${i}`, guesser, db))
		);
		const refusals = tries.map((one) => (one.status === 'rejected' ? (one.reason as unknown) : null));
		expect(refusals.filter((one) => one instanceof TooManyRequestsError).length).toBeGreaterThan(0);
		expect(refusals.filter((one) => one instanceof NotFoundError).length).toBeLessThanOrEqual(480);
		expect(refusals).not.toContain(null);
		await open(token);
	});
});
