import { and, eq, sql } from 'drizzle-orm';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { ConflictError, ForbiddenError, InvalidInputError, NotFoundError } from '../access/errors';
import type { Membership } from '../access/membership';
import type { Database } from '../db';
import {
	auditEvents,
	billingCustomers,
	checkouts,
	exportGrants,
	invoices,
	subscriptions
} from '../db/schema';
import { testDatabase } from '../testing/db';
import { member } from '../testing/members';
import { ensureCatalogue } from './catalogue';
import { changeSeats, previewSeats } from './change-seats';
import { reviewPurchase, startCheckout } from './checkout';
import { PaymentsAwayError } from './errors';
import { fulfilCheckout } from './fulfil';
import { exportsLeft } from './ledger';
import { plans } from './plans';
import { openPortal } from './portal';
import { seatsOf } from './seats';
import { stripe } from './stripe';
import { openShop, pay, type Shop } from './testing/shop';

let db: Database;
let drop: () => Promise<void>;
let shop: Shop;
let owner: Membership;

beforeAll(async () => {
	({ db, drop } = await testDatabase());
	shop = await openShop(db);
});
afterAll(async () => {
	await shop.stop();
	await drop();
});
beforeEach(async () => {
	shop.fake.control.webhooks({ mode: 'normal', order: 'as made', duplicates: 0, delayMilliseconds: 0 });
	owner = await member(db, ['owner', 'author']);
});

const practice = { plan: 'practice', interval: 'month', seats: 3 } as const;
const rowsOf = (membership: Membership) =>
	db.select().from(checkouts).where(eq(checkouts.organisationId, membership.organisationId));
const sessionOf = async (membership: Membership) => (await rowsOf(membership)).at(-1)?.sessionId ?? '';
const subscriptionOf = async (membership: Membership) =>
	(
		await db.select().from(subscriptions).where(eq(subscriptions.organisationId, membership.organisationId))
	)[0];

async function subscribe(
	membership: Membership,
	seats = 3,
	interval: 'month' | 'year' = 'month'
): Promise<void> {
	await pay(await startCheckout(membership, { ...practice, seats, interval }, db));
	await shop.settle();
}

describe('the catalogue', () => {
	it('is made once, and a price of another amount takes over its name', async () => {
		expect(await ensureCatalogue(stripe(), plans())).toEqual([]);
		const dearer = { ...plans(), pack: { ...plans().pack, price: 5000 } };
		expect(await ensureCatalogue(stripe(), dearer)).toEqual(['noonmark-pack']);
		expect(await ensureCatalogue(stripe(), dearer)).toEqual([]);
		expect(await ensureCatalogue(stripe(), plans())).toEqual(['noonmark-pack']);
	});
});

describe('a plan', () => {
	it('is bought: review, payment page, return, and what it gives', async () => {
		const review = await reviewPurchase(owner, practice, db);
		expect(review).toMatchObject({ each: 2400, total: 7200, currency: 'eur' });
		const address = await startCheckout(owner, practice, db);
		expect(address.startsWith(shop.fake.address)).toBe(true);
		const session = await stripe().checkout.sessions.retrieve(await sessionOf(owner), {
			expand: ['line_items']
		});
		expect(session.amount_total).toBe(7200);
		expect(session.metadata).toMatchObject({ organisation: owner.organisationId });
		const back = await pay(address);
		expect(back).toBe(`https://noonmark.example/billing/return?session=${session.id}`);
		// The buyer is back before any event.
		shop.fake.control.webhooks({ mode: 'hold' });
		expect(await fulfilCheckout(session.id, { only: owner.organisationId, db })).toBe('done');
		expect(await subscriptionOf(owner)).toMatchObject({ status: 'active', planId: 'practice', quantity: 3 });
		expect(await exportsLeft(owner.organisationId, db)).toMatchObject({ left: 24, blocked: false });
		expect(await seatsOf(owner.organisationId, db)).toEqual({ taken: 1, limit: 3 });
		const kept = await stripe().subscriptions.retrieve((await subscriptionOf(owner))?.id ?? '');
		expect(kept.metadata).toMatchObject({ organisation: owner.organisationId });
		// Then the events come, and the buyer reloads the page.
		shop.fake.control.release('reversed');
		await shop.settle();
		expect(await fulfilCheckout(session.id, { only: owner.organisationId, db })).toBe('done');
		expect((await exportsLeft(owner.organisationId, db)).left).toBe(24);
		const bills = await db.select().from(invoices).where(eq(invoices.organisationId, owner.organisationId));
		expect(bills).toHaveLength(1);
		expect(bills[0]).toMatchObject({ status: 'paid', total: 7200, currency: 'eur' });
		const bought = await db.$count(
			auditEvents,
			and(eq(auditEvents.organisationId, owner.organisationId), eq(auditEvents.action, 'billing.bought'))
		);
		expect(bought).toBe(1);
	});

	it('is not given for coming back without paying, or after a declined card', async () => {
		const address = await startCheckout(owner, practice, db);
		expect(await pay(address, '4000 0000 0000 0002')).toBeNull();
		expect(await fulfilCheckout(await sessionOf(owner), { only: owner.organisationId, db })).toBe('open');
		await shop.settle();
		expect(await subscriptionOf(owner)).toBeUndefined();
		expect((await exportsLeft(owner.organisationId, db)).left).toBe(0);
		await pay(address);
		await shop.settle();
		expect(await subscriptionOf(owner)).toMatchObject({ status: 'active' });
	});

	it('is one purchase, whatever is clicked: same page for the same choice, none for an earlier one', async () => {
		const [first, second] = await Promise.all([
			startCheckout(owner, practice, db),
			startCheckout(owner, practice, db)
		]);
		expect(second).toBe(first);
		expect(await startCheckout(owner, practice, db)).toBe(first);
		expect(await rowsOf(owner)).toHaveLength(1);
		const other = await startCheckout(owner, { ...practice, seats: 4 }, db);
		expect(other).not.toBe(first);
		expect(await pay(first)).toBeNull();
		expect((await fetch(first)).status).toBe(410);
		await pay(other);
		await shop.settle();
		expect(await subscriptionOf(owner)).toMatchObject({ quantity: 4 });
		await expect(startCheckout(owner, practice, db)).rejects.toThrow(ConflictError);
		await expect(reviewPurchase(owner, practice, db)).rejects.toThrow(ConflictError);
		const customers = await stripe().customers.list({ limit: 100 });
		const own = customers.data.filter(({ metadata }) => metadata.organisation === owner.organisationId);
		expect(own).toHaveLength(1);
		expect(own[0]?.email ?? null).toBeNull();
	});

	it('is one session, also where the process died before it had noted the answer', async () => {
		const address = await startCheckout(owner, practice, db);
		const ours = eq(checkouts.organisationId, owner.organisationId);
		await db.update(checkouts).set({ sessionId: null }).where(ours);
		expect(await startCheckout(owner, practice, db)).toBe(address);
		const made = await stripe().checkout.sessions.list({ limit: 100 });
		const own = made.data.filter(({ client_reference_id }) => client_reference_id === owner.organisationId);
		expect(own.map(({ id }) => id)).toEqual([await sessionOf(owner)]);
	});

	it('is not stuck on an answer that says no more than that something failed', async () => {
		const refused = { 'stripe-should-retry': 'false' };
		shop.fake.control.failNext({ path: '/v1/checkout/sessions', status: 500, headers: refused });
		await expect(startCheckout(owner, practice, db)).rejects.toThrow(PaymentsAwayError);
		expect(await startCheckout(owner, practice, db)).toContain('/checkout/');
	});

	it('can be begun anew once its page has expired', async () => {
		const address = await startCheckout(owner, practice, db);
		await stripe().checkout.sessions.expire(await sessionOf(owner));
		await shop.settle();
		expect((await rowsOf(owner))[0]?.state).toBe('expired');
		expect(await startCheckout(owner, practice, db)).not.toBe(address);
	});

	it('wants seats that it can have and that the members fit in', async () => {
		const field = async (input: Parameters<typeof startCheckout>[1]) => {
			const fault = await startCheckout(owner, input, db).catch((error: unknown) => error);
			if (!(fault instanceof InvalidInputError)) throw new Error('It was taken.');
			return Object.values(fault.fields)[0];
		};
		expect(await field({ ...practice, seats: 1 })).toBe(
			'Practice is for 2 to 20 seats: for 1 seat choose Individual.'
		);
		expect(await field({ ...practice, seats: 21 })).toContain('choose Organisation');
		expect(await field({ ...practice, seats: 2.5 })).toContain('whole number');
		expect(await field({ ...practice, plan: 'gold' })).toContain('one of the plans');
		expect(await field({ packs: 0 })).toContain('between 1 and 20');
		await member(db, ['author'], owner);
		expect(await field({ plan: 'individual', interval: 'year', seats: 1 })).toContain(
			'2 members hold a seat'
		);
		expect(await rowsOf(owner)).toEqual([]);
	});

	it('is for owners and the billing contact', async () => {
		const author = await member(db, ['author', 'reviewer', 'reader'], owner);
		await expect(startCheckout(author, practice, db)).rejects.toThrow(ForbiddenError);
		await expect(openPortal(author, db)).rejects.toThrow(ForbiddenError);
		await expect(changeSeats(author, 3, 'm', db)).rejects.toThrow(ForbiddenError);
		await expect(startCheckout(null, practice, db)).rejects.toThrow(NotFoundError);
		const contact = await member(db, ['billing'], owner);
		await expect(openPortal(contact, db)).rejects.toThrow(ConflictError);
		await startCheckout(contact, practice, db);
		expect((await openPortal(contact, db)).startsWith(shop.fake.address)).toBe(true);
	});
});

describe('packs', () => {
	it('are given once for a paid session, and last twelve months', async () => {
		await pay(await startCheckout(owner, { packs: 2 }, db));
		shop.fake.control.webhooks({ duplicates: 2 });
		await shop.settle();
		const session = await sessionOf(owner);
		for (let i = 0; i < 2; i++) expect(await fulfilCheckout(session, { db })).toBe('done');
		const grants = await db
			.select({
				amount: exportGrants.amount,
				year: sql<boolean>`${exportGrants.validUntil} between now() + interval '364 days' and now() + interval '367 days'`
			})
			.from(exportGrants)
			.where(eq(exportGrants.organisationId, owner.organisationId));
		expect(grants).toEqual([{ amount: 20, year: true }]);
		expect((await exportsLeft(owner.organisationId, db)).left).toBe(20);
	});

	it('of another organisation’s session are nobody else’s', async () => {
		const stranger = await member(db, ['owner']);
		await pay(await startCheckout(owner, { packs: 1 }, db));
		const session = await sessionOf(owner);
		expect(await fulfilCheckout(session, { only: stranger.organisationId, db })).toBe('unknown');
		expect((await exportsLeft(stranger.organisationId, db)).left).toBe(0);
		expect(await fulfilCheckout('cs_test_invented', { only: owner.organisationId, db })).toBe('unknown');
	});

	it('go back in proportion when money goes back, and never below nothing', async () => {
		await pay(await startCheckout(owner, { packs: 1 }, db));
		await shop.settle();
		const session = await stripe().checkout.sessions.retrieve(await sessionOf(owner));
		const payment_intent = String(session.payment_intent);
		await stripe().refunds.create({ payment_intent, amount: 900 });
		shop.fake.control.webhooks({ duplicates: 1 });
		await shop.settle();
		expect((await exportsLeft(owner.organisationId, db)).left).toBe(8);
		await stripe().refunds.create({ payment_intent });
		await shop.settle();
		expect((await exportsLeft(owner.organisationId, db)).left).toBe(0);
	});
});

describe('seats', () => {
	it('are changed once, with what it costs shown before, and the plan follows them', async () => {
		await subscribe(owner, 3);
		const preview = await previewSeats(owner, 5, db);
		expect(preview).toMatchObject({ from: { seats: 3 }, to: { seats: 5, plan: 'Practice' }, each: 12_000 });
		expect(preview.now).toBeGreaterThan(4700);
		expect(preview.now).toBeLessThanOrEqual(4800);
		await Promise.all([changeSeats(owner, 5, 'one', db), changeSeats(owner, 5, 'one', db)]);
		expect(await subscriptionOf(owner)).toMatchObject({ quantity: 5, planId: 'practice' });
		expect(await exportsLeft(owner.organisationId, db)).toMatchObject({ left: 40 });
		await changeSeats(owner, 21, 'two', db);
		expect(await subscriptionOf(owner)).toMatchObject({ quantity: 21, planId: 'organisation' });
		expect(await previewSeats(owner, 2, db)).toMatchObject({ now: 0, to: { plan: 'Practice' } });
		await changeSeats(owner, 2, 'three', db);
		await changeSeats(owner, 5, 'four', db);
		expect(await subscriptionOf(owner)).toMatchObject({ quantity: 5, planId: 'practice' });
		// What the month was given stays; nothing is given twice.
		expect((await exportsLeft(owner.organisationId, db)).left).toBe(210);
		await shop.settle();
		expect(await seatsOf(owner.organisationId, db)).toEqual({ taken: 1, limit: 5 });
	});

	it('that are added to a yearly plan are charged at once, or not added', async () => {
		await subscribe(owner, 3, 'year');
		expect(await previewSeats(owner, 5, db)).toMatchObject({ atOnce: true, each: 120_000, next: 120_000 });
		await changeSeats(owner, 5, 'one', db);
		const subscription = await subscriptionOf(owner);
		expect(subscription).toMatchObject({ quantity: 5 });
		const paid = await db.select().from(invoices).where(eq(invoices.organisationId, owner.organisationId));
		expect(paid).toHaveLength(2);
		expect(paid.every(({ status }) => status === 'paid')).toBe(true);
		expect(paid.reduce((sum, { total }) => sum + total, 0)).toBeGreaterThan(119_000);

		if (subscription === undefined) throw new Error('no subscription');
		const customer = subscription.customerId;
		const bad = await stripe().paymentMethods.attach('pm_card_chargeCustomerFail', { customer });
		await stripe().subscriptions.update(subscription.id, { default_payment_method: bad.id });
		await expect(changeSeats(owner, 9, 'two', db)).rejects.toThrow('The card was declined');
		expect(await subscriptionOf(owner)).toMatchObject({ quantity: 5 });
		expect((await stripe().subscriptions.retrieve(subscription.id)).items.data[0]?.quantity).toBe(5);
	});

	it('are never fewer than the members, nor changed without a plan', async () => {
		await expect(changeSeats(owner, 2, 'm', db)).rejects.toThrow(ConflictError);
		await subscribe(owner, 3);
		await member(db, ['author'], owner);
		await member(db, ['reader'], owner);
		await expect(changeSeats(owner, 2, 'm', db)).rejects.toThrow(InvalidInputError);
		await expect(previewSeats(owner, 3, db)).rejects.toThrow(InvalidInputError);
		await expect(changeSeats(owner, 0, 'm', db)).rejects.toThrow(InvalidInputError);
		expect(await subscriptionOf(owner)).toMatchObject({ quantity: 3 });
	});
});

it('makes another customer after the first was removed over there', async () => {
	await subscribe(owner);
	const [first] = await db
		.select()
		.from(billingCustomers)
		.where(eq(billingCustomers.organisationId, owner.organisationId));
	await stripe().customers.del(first?.customerId ?? '');
	await shop.settle();
	expect(await subscriptionOf(owner)).toMatchObject({ status: 'canceled' });
	await subscribe(owner, 2);
	const [second] = await db
		.select()
		.from(billingCustomers)
		.where(eq(billingCustomers.organisationId, owner.organisationId));
	expect(second?.customerId).not.toBe(first?.customerId);
	expect((await seatsOf(owner.organisationId, db)).limit).toBe(2);
});
