import { eq } from 'drizzle-orm';
import pino from 'pino';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { ForbiddenError } from '../access/errors';
import { changeName } from '../accounts/own-account';
import { saveDraft } from '../calculations/change';
import { getCalculation } from '../calculations/load';
import { openDatabase, type Database } from '../db';
import { dossierGuests, dossiers, memberships, notices, reports, reviews, users } from '../db/schema';
import { updateDossier } from '../dossiers/update';
import { sendNoticeJob } from '../jobs/handlers/send-notice';
import { startRunner } from '../jobs/runner';
import { idleJobs } from '../jobs/testing/idle-jobs';
import { closeMail } from '../mail/transport';
import { updateOrganisation } from '../organisations/settings';
import { issueReport } from '../reports/issue';
import { reportIssuing } from '../reports/issuing';
import { getReport } from '../reports/load';
import { testDatabase } from '../testing/db';
import { setTestEnvironment } from '../testing/environment';
import { openMailbox, type Mailbox } from '../testing/mailbox';
import { coveredBy } from './approval';
import { returnReport } from './decide';
import { enterFigure } from './own-figure';
import { reopenReport } from './reopen';
import { recallReview } from './send';
import { reviewOf } from './state';
import { reviewWorld, type World } from './testing/world';

let db: Database;
let url: string;
let drop: () => Promise<void>;
let world: World;
let mailbox: Mailbox;

beforeAll(async () => {
	mailbox = await openMailbox();
	setTestEnvironment({ SMTP_URL: mailbox.url });
	({ db, url, drop } = await testDatabase());
});
afterAll(async () => {
	closeMail();
	await mailbox.close();
	await drop();
});
beforeEach(async () => {
	world = await reviewWorld(db);
});

const settings = (change: Record<string, unknown> = {}) => ({
	name: world.owner.organisationName,
	address: ['1 Test Road'],
	registrationLine: '',
	numberPrefix: 'TB',
	selfApproval: false,
	...change
});

async function changeDossier(change: Record<string, string>): Promise<void> {
	const [row] = await db.select().from(dossiers).where(eq(dossiers.id, world.dossierId));
	if (row === undefined) throw new Error('no dossier');
	const { title, question, client, clientContact, scope, reliance, projectNumber, orderNumber } = row;
	const fields = { title, question, client, clientContact, scope, reliance, projectNumber, orderNumber };
	await updateDossier(world.author, row.id, { ...fields, ...change }, row.version, db);
}

async function rename(): Promise<void> {
	const { draft, version } = await getCalculation(world.author, world.calculationId, db);
	const change = { draft, baseVersion: version, title: 'Tile, renamed' };
	await saveDraft(world.author, world.calculationId, change, db);
}

const person = async (id: string) => {
	const [row] = await db.select().from(users).where(eq(users.id, id));
	if (row === undefined) throw new Error('no person');
	return { id, name: row.name, email: row.email };
};

/** What an approval covers, each with the words that the reason must hold. */
const covered: [string, string, () => Promise<void>][] = [
	['the addressee', 'the addressee', () => changeDossier({ client: 'Another Client' })],
	['the contact', 'the addressee', () => changeDossier({ clientContact: 'R. Lund' })],
	['the scope', 'the scope', () => changeDossier({ scope: 'One tile.' })],
	['who may rely on it', 'who may rely on it', () => changeDossier({ reliance: 'Anybody.' })],
	['the project number', 'the project number', () => changeDossier({ projectNumber: 'P-1' })],
	['the order number', 'the order number', () => changeDossier({ orderNumber: 'O-1' })],
	[
		'the letterhead’s name',
		'the letterhead',
		() => updateOrganisation(world.owner, settings({ name: 'New' }), db)
	],
	[
		'its address',
		'the letterhead',
		() => updateOrganisation(world.owner, settings({ address: ['2 Road'] }), db)
	],
	[
		'its registration',
		'the letterhead',
		() => updateOrganisation(world.owner, settings({ registrationLine: 'No. 1' }), db)
	],
	['a calculation’s title', 'Calculation', rename],
	[
		'the author’s name',
		'the author',
		async () => changeName(await person(world.author.userId), 'Ada Newname', db)
	]
];

describe('an approval', () => {
	it.each(covered)('is void once %s changes, in words that say so', async (_what, words, change) => {
		const id = await world.approved();
		await change();
		expect(await world.stateOf(id)).toBe('draft');
		const { approval } = await reviewOf(world.author, id, db);
		expect(approval).toMatchObject({ holds: false, why: expect.stringContaining(words) as string });
		const told = await db.select().from(notices).where(eq(notices.kind, 'approval-void'));
		const mine = told.filter(({ subject }) => subject.reportId === id).map(({ userId }) => userId);
		expect(mine.sort()).toEqual([world.author.userId, world.reviewer.userId].sort());
	});

	it('stands while nothing that the report prints changes', async () => {
		const id = await world.approved();
		await changeDossier({ title: 'Another title of the dossier', question: 'Another question there' });
		await updateOrganisation(world.owner, settings({ numberPrefix: 'XY', selfApproval: true }), db);
		await changeName(await person(world.reviewer.userId), 'Nobody printed', db);
		const { draft, version } = await getCalculation(world.author, world.calculationId, db);
		const note = draft.assumptions.solarReflectance;
		if (note === undefined) throw new Error('no input');
		draft.assumptions.solarReflectance = { ...note, value: '0.34' };
		await saveDraft(world.author, world.calculationId, { draft, baseVersion: version }, db);
		expect(await world.stateOf(id)).toBe('approved');
		expect((await reviewOf(world.author, id, db)).approval).toMatchObject({ holds: true });
		await expect(issueReport(world.author, id, db)).resolves.toEqual(expect.any(String));
	});

	it('covers reviewers’ figures, and with them the names under them', async () => {
		const id = await world.sent();
		const input = {
			runId: world.runId,
			output: 'solarReflectanceIndex',
			value: '60',
			unit: '',
			giveOrTake: ''
		};
		await enterFigure(world.guest, id, { ...input, kind: 'upper-bound', averages: '', route: 'By hand' }, db);
		await world.approve(id);
		await changeName(await person(world.guest.userId), 'Idris Othername', db);
		expect(await world.stateOf(id)).toBe('draft');
	});

	it('that lost its ground unseen is found at the issue, voided and refused in words', async () => {
		const id = await world.approved();
		await db
			.update(dossiers)
			.set({ client: 'Changed past the door' })
			.where(eq(dossiers.id, world.dossierId));
		await expect(issueReport(world.author, id, db)).rejects.toThrow(/the addressee differs/);
		await expect(issueReport(world.author, id, db)).rejects.toThrow(ForbiddenError);
		expect(await world.stateOf(id)).toBe('draft');
	});

	it('has the same digest however often it is read, and after the round’s model came back from the database', async () => {
		const id = await world.approved();
		const report = await getReport(world.author, id, db);
		const [first, second] = [
			await coveredBy(world.author, report, db),
			await coveredBy(world.guest, report, db)
		];
		const [round] = await db.select().from(reviews).where(eq(reviews.reportId, id));
		expect(first.digest).toMatch(/^[0-9a-f]{64}$/);
		expect(second.digest).toBe(first.digest);
		expect(round?.digest).toBe(first.digest);
		expect(round?.model).toEqual(JSON.parse(JSON.stringify(first.model)));
	});

	it('and a change of the dossier at the same moment: never approved with what was not read', async () => {
		for (let turn = 0; turn < 6; turn++) {
			const id = await world.sent();
			await Promise.allSettled([world.approve(id), changeDossier({ client: `Client ${turn}` })]);
			const report = await getReport(world.author, id, db);
			if (report.state === 'approved') {
				const [round] = await db.select().from(reviews).where(eq(reviews.reportId, id));
				expect((await coveredBy(world.author, report, db)).digest).toBe(round?.digest);
			}
			await db.delete(reports).where(eq(reports.id, id));
		}
	});
});

/** Lets a worker send everything that waits. */
async function deliver(): Promise<void> {
	const own = openDatabase(url, 6);
	const runner = await startRunner({
		...own,
		log: pino({ level: 'silent' }),
		concurrency: 2,
		pollMilliseconds: 20,
		jobs: idleJobs({ 'send-notice': sendNoticeJob() })
	});
	const until = Date.now() + 20_000;
	for (;;) {
		const { rows } = await own.pool.query<{ n: number }>(
			`select count(*)::int as n from pgboss.job where name = 'send-notice' and state in ('created', 'retry', 'active')`
		);
		if (rows[0]?.n === 0 || Date.now() > until) break;
		await new Promise((resolve) => setTimeout(resolve, 50));
	}
	await runner.stop(2000);
	await own.pool.end();
}

describe('notices', () => {
	const mailsTo = async (userId: string) => {
		const { email } = await person(userId);
		const addressed = mailbox.mails.filter((mail) => {
			const to = Array.isArray(mail.to) ? mail.to : mail.to === undefined ? [] : [mail.to];
			return to.some(({ value }) => value.some(({ address }) => address === email));
		});
		return addressed.map(({ subject, text, html, messageId }) => ({
			subject: subject ?? '',
			text: text ?? '',
			html: html === false ? '' : html,
			messageId
		}));
	};

	it('go out once, in text and HTML, to who is concerned', async () => {
		const id = await world.draft();
		await world.send(id, world.author, [world.reviewer.userId, world.guest.userId]);
		await deliver();
		await returnReport(world.reviewer, id, { reasons: 'Name the <table>.' }, db);
		await world.send(id);
		await deliver();
		await world.approve(id);
		await deliver();
		await deliver();
		const { number } = await getReport(world.author, id, db);

		const asked = await mailsTo(world.reviewer.userId);
		expect(asked.map(({ subject }) => subject)).toEqual(
			Array.from({ length: 2 }, () => `Please review ${number}, revision 1`)
		);
		for (const { text, html, messageId } of asked) {
			expect(text).toContain(`https://noonmark.example/reports/${id}/review?organisation=`);
			const { organisationId } = world.author;
			expect(html).toContain(
				`href="https://noonmark.example/reports/${id}/review?organisation=${organisationId}"`
			);
			expect(text).toContain('Look at the emittance.');
			expect(messageId).toMatch(/^<[0-9a-f-]{36}@noonmark\.example>$/);
		}
		const [guest, ...more] = await mailsTo(world.guest.userId);
		expect(more).toEqual([]);
		expect(guest?.text).toContain('from outside the organisation');

		const author = await mailsTo(world.author.userId);
		expect(author.map(({ subject }) => subject)).toEqual([
			`Returned: ${number}, revision 1`,
			`Approved: ${number}, revision 1`
		]);
		expect(author[0]?.text).toContain('Name the <table>.');
		expect(author[0]?.html).toContain('Name the &lt;table&gt;.');

		await reopenReport(world.author, id, db);
		await deliver();
		expect((await mailsTo(world.reviewer.userId)).at(-1)?.subject).toBe(
			`The approval of ${number}, revision 1 is void`
		);
		expect(await mailsTo(world.author.userId)).toHaveLength(2);
	});

	it('tell author and approver of the issue', async () => {
		const id = await world.approved();
		const issueId = await issueReport(world.author, id, db);
		await db.transaction(async (tx) => {
			const issue = await tx.query.issues.findFirst({ where: (table, { eq: is }) => is(table.id, issueId) });
			if (issue === undefined) throw new Error('no issue');
			const signed = { pdf: new Uint8Array(), certificateId: '', issuedAt: new Date() };
			await reportIssuing.publish(issue, signed, tx);
		});
		await deliver();
		const { number } = await getReport(world.author, id, db);
		for (const { userId } of [world.author, world.reviewer]) {
			const issued = (await mailsTo(userId)).filter(({ subject }) => subject.startsWith('Issued'));
			expect(issued).toHaveLength(1);
			expect(issued[0]?.subject).toBe(`Issued: ${number}, revision 1`);
		}
	});

	it('do not reach who has no access any more, nor ask for what was taken back; the notice says why', async () => {
		const id = await world.draft();
		await world.send(id, world.author, [world.reviewer.userId, world.guest.userId]);
		await db.delete(memberships).where(eq(memberships.userId, world.reviewer.userId));
		await db.delete(dossierGuests).where(eq(dossierGuests.userId, world.guest.userId));
		await deliver();
		expect(await mailsTo(world.reviewer.userId)).toEqual([]);
		expect(await mailsTo(world.guest.userId)).toEqual([]);
		const rows = await db.select().from(notices);
		const mine = rows.filter(({ subject }) => subject.reportId === id);
		expect(mine).toHaveLength(2);
		for (const row of mine)
			expect(row).toMatchObject({ sentAt: null, problem: expect.stringContaining('access') as string });

		const other = await world.draft();
		await world.send(other, world.author, [world.both.userId]);
		await recallReview(world.author, other, db);
		await deliver();
		expect(await mailsTo(world.both.userId)).toEqual([]);
	});

	it('are tried again when the mail server refuses, and are still one', async () => {
		const id = await world.draft();
		mailbox.refuse(2);
		await world.send(id, world.author, [world.both.userId]);
		await db.execute(
			`update pgboss.job set retry_delay = 0, retry_backoff = false where name = 'send-notice'`
		);
		await deliver();
		expect(mailbox.refused()).toBeGreaterThanOrEqual(2);
		expect(await mailsTo(world.both.userId)).toHaveLength(1);
		const rows = await db.select().from(notices).where(eq(notices.userId, world.both.userId));
		expect(rows).toHaveLength(1);
		expect(rows[0]?.sentAt).not.toBeNull();
	});

	it('are rolled back with the change that they tell of', async () => {
		const id = await world.sent();
		const before = await db.$count(notices);
		await expect(
			db.transaction(async (tx) => {
				await tx.update(reports).set({ state: 'draft' }).where(eq(reports.id, id));
				const { writeNotice } = await import('../notices/write');
				await writeNotice(tx, {
					kind: 'report-issued',
					organisationId: world.owner.organisationId,
					to: [world.author.userId, world.author.userId, null],
					subject: { reportId: id }
				});
				expect(await tx.$count(notices)).toBe(before + 1);
				throw new Error('given up');
			})
		).rejects.toThrow('given up');
		expect(await db.$count(notices)).toBe(before);
	});
});
