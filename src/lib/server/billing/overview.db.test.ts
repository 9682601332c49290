import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { ForbiddenError, NotFoundError } from '../access/errors';
import type { Membership } from '../access/membership';
import type { Database } from '../db';
import { subscriptions } from '../db/schema';
import { testDatabase } from '../testing/db';
import { testPerson } from '../testing/people';
import { member } from '../testing/members';
import { createOrganisation } from '../organisations/create';
import { grantTrial } from './ledger';
import { billingOverview, exportsSentence } from './overview';
import { seatsOf } from './seats';
import { giveExports } from './testing/exports';

let db: Database;
let drop: () => Promise<void>;
let owner: Membership;
const day = 86_400_000;
const inDays = (days: number) => new Date(Date.now() + days * day);

beforeAll(async () => {
	({ db, drop } = await testDatabase());
});
afterAll(async () => drop());
beforeEach(async () => {
	owner = await member(db, ['owner', 'author']);
});

async function subscribed(own: Partial<typeof subscriptions.$inferInsert> = {}): Promise<void> {
	await db.delete(subscriptions).where(eq(subscriptions.organisationId, owner.organisationId));
	await db.insert(subscriptions).values({
		id: `sub_${owner.organisationId}`,
		organisationId: owner.organisationId,
		customerId: 'cus_1',
		status: 'active',
		planId: 'practice',
		interval: 'month',
		priceId: 'price_1',
		itemId: 'si_1',
		quantity: 2,
		startedAt: inDays(-10),
		anchor: inDays(-10),
		periodStart: inDays(-10),
		periodEnd: inDays(20),
		paidUntil: inDays(20),
		...own
	});
}

const leads = async () => (await billingOverview(owner, db)).notices.map(({ lead }) => lead);

describe('the billing page', () => {
	it('tells of every state out of the ordinary, with its date', async () => {
		expect((await billingOverview(owner, db)).plan).toMatch(/^There is no plan\./);
		await subscribed();
		expect(await leads()).toEqual([]);
		await subscribed({ status: 'past_due', paidUntil: inDays(-2) });
		expect((await leads())[0]).toMatch(/^An invoice is not paid: new exports stop on \d+ \w+ \d{4}\.$/);
		await subscribed({ status: 'past_due', paidUntil: inDays(-8) });
		expect((await leads())[0]).toMatch(/new exports have stopped/);
		await subscribed({ cancelAtPeriodEnd: true });
		expect((await leads())[0]).toMatch(/^The plan is cancelled and ends on/);
		await subscribed({ status: 'hibernating' });
		expect((await leads())[0]).toMatch(/state that is not known here/);
		await subscribed({ status: 'canceled', endedAt: inDays(-1) });
		await member(db, ['author'], owner);
		expect(await leads()).toEqual(['2 members for 1 seat.']);
		expect((await billingOverview(owner, db)).plan).toMatch(/^The plan ended on/);
		expect(await seatsOf(owner.organisationId, db)).toEqual({ taken: 2, limit: 1 });
	});

	it('is for owners and the billing contact', async () => {
		await expect(billingOverview(await member(db, ['author'], owner), db)).rejects.toThrow(ForbiddenError);
		await expect(billingOverview({ ...owner, roles: ['guest'], onlyDossiers: [] }, db)).rejects.toThrow(
			NotFoundError
		);
		expect((await billingOverview(await member(db, ['billing'], owner), db)).isSubscribed).toBe(false);
	});
});

describe('the sentence where an export is about to be used', () => {
	it('counts what is left and shows each reader their way to more', async () => {
		const author = await member(db, ['author'], owner);
		expect(await exportsSentence(author, db)).toEqual({
			free: 0,
			sentence: 'Issuing uses one export, and none is left.',
			mayIssue: false,
			more: { text: 'An owner or the billing contact can choose a plan or buy 10 exports.', href: null }
		});
		expect((await exportsSentence(owner, db)).more).toEqual({
			text: 'On the billing page you can choose a plan or buy 10 exports.',
			href: '/billing'
		});
		await giveExports(db, owner.organisationId, 7);
		expect(await exportsSentence(author, db)).toEqual({
			free: 7,
			sentence: 'Issuing uses one export; 7 are left.',
			mayIssue: true,
			more: null
		});
		await subscribed({ status: 'unpaid' });
		expect(await exportsSentence(owner, db)).toMatchObject({ free: 0, mayIssue: false });
		await expect(exportsSentence(await member(db, ['billing'], owner), db)).rejects.toThrow(NotFoundError);
	});
});

describe('exports to try', () => {
	it('come once for a person, however many organisations they found', async () => {
		const person = await testPerson(db);
		const found = (name: string) => createOrganisation(person, { name, address: [], numberPrefix: 'TB' }, db);
		const [first, second] = [await found('First'), await found('Second')];
		expect((await billingOverview(first, db)).exports.left).toBe(2);
		expect((await billingOverview(second, db)).exports.left).toBe(0);
		await grantTrial(db, second.organisationId, person.id);
		expect((await billingOverview(second, db)).exports.left).toBe(0);
	});
});
