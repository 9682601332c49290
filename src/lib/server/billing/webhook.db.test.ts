import { eq, sql } from 'drizzle-orm';
import type Stripe from 'stripe';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import type { Membership } from '../access/membership';
import type { Database } from '../db';
import { billingEvents, subscriptions } from '../db/schema';
import { testDatabase } from '../testing/db';
import { member } from '../testing/members';
import { startCheckout } from './checkout';
import { customerOf } from './customers';
import { RefusedEventError } from './errors';
import { followEvent } from './handle-event';
import { exportsLeft } from './ledger';
import { reconcile } from './reconcile';
import { standingOf } from './standing';
import { apiVersion, stripe } from './stripe';
import { openShop, pay, webhookSecret, type Shop } from './testing/shop';
import { receiveEvent } from './webhook';
import pino from 'pino';

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

const silent = pino({ level: 'silent' });
const practice = { plan: 'practice', interval: 'month', seats: 2 } as const;
const now = () => Math.floor(Date.now() / 1000);

async function subscribe(): Promise<{ customer: string; subscription: string }> {
	await pay(await startCheckout(owner, practice, db));
	await shop.settle();
	const [row] = await db
		.select()
		.from(subscriptions)
		.where(eq(subscriptions.organisationId, owner.organisationId));
	return { customer: (await customerOf(owner.organisationId, db)) ?? '', subscription: row?.id ?? '' };
}

const stands = async () => {
	const { left, blocked, access } = await exportsLeft(owner.organisationId, db);
	return { left, blocked, standing: access?.standing };
};

/** An event as the payment service would sign it, unless told otherwise. */
function signed(
	own: { [name: string]: unknown } = {},
	{ at = now(), secret = webhookSecret }: { at?: number; secret?: string } = {}
): { body: string; header: string } {
	const event = {
		id: `evt_${Math.random().toString(36).slice(2)}`,
		object: 'event',
		api_version: apiVersion,
		created: now(),
		livemode: false,
		pending_webhooks: 1,
		request: null,
		type: 'customer.subscription.updated',
		data: { object: { id: 'sub_invented', object: 'subscription', customer: 'cus_invented' } },
		...own
	};
	const body = JSON.stringify(event);
	const header = stripe().webhooks.generateTestHeaderString({ payload: body, secret, timestamp: at });
	return { body, header };
}

describe('the door', () => {
	const kept = () => db.$count(billingEvents);
	const jobs = async () => {
		const { rows } = await db.execute<{ count: number }>(
			sql`select count(*)::int as count from pgboss.job where name = 'billing-event'`
		);
		return rows[0]?.count ?? 0;
	};

	it('keeps an event and its job once, however often it comes, and also at the same moment', async () => {
		const [before, jobsBefore] = [await kept(), await jobs()];
		const { body, header } = signed();
		const answers = await Promise.all([1, 2, 3].map(() => receiveEvent(body, header, db)));
		expect(answers.sort()).toEqual(['kept', 'known', 'known']);
		expect(await receiveEvent(body, header, db)).toBe('known');
		expect([await kept(), await jobs()]).toEqual([before + 1, jobsBefore + 1]);
	});

	it('takes either of two secrets while one is being replaced', async () => {
		const newer = signed({}, { secret: 'whsec_newer' });
		expect(await receiveEvent(newer.body, newer.header, db)).toBe('kept');
	});

	it.each<[string, () => [string, string | null], RegExp]>([
		['no signature', () => [signed().body, null], /not signed/],
		[
			'another secret',
			() => {
				const { body, header } = signed({}, { secret: 'whsec_somebody' });
				return [body, header];
			},
			/does not match/
		],
		['a changed body', () => [signed({ id: 'evt_other' }).body, signed().header], /does not match/],
		[
			'the same JSON in another order',
			() => {
				const { body, header } = signed();
				const entries = Object.entries(JSON.parse(body) as { [name: string]: unknown });
				return [JSON.stringify(Object.fromEntries(entries.reverse())), header];
			},
			/does not match/
		],
		[
			'the same JSON with a space',
			() => {
				const { body, header } = signed();
				return [body.replace('{', '{ '), header];
			},
			/does not match/
		],
		[
			'ten minutes ago',
			() => {
				const { body, header } = signed({}, { at: now() - 600 });
				return [body, header];
			},
			/does not match/
		],
		[
			'ten minutes from now',
			() => {
				const { body, header } = signed({}, { at: now() + 600 });
				return [body, header];
			},
			/future/
		],
		[
			'a signature without a time',
			() => {
				const { body, header } = signed();
				return [body, header.replace(/t=\d+,/, '')];
			},
			/no time/
		],
		[
			'the other mode',
			() => {
				const { body, header } = signed({ livemode: true });
				return [body, header];
			},
			/other mode/
		],
		[
			'another account',
			() => {
				const { body, header } = signed({ account: 'acct_else' });
				return [body, header];
			},
			/other account|another account/
		],
		[
			'another version',
			() => {
				const { body, header } = signed({ api_version: '2020-08-27' });
				return [body, header];
			},
			/version/
		]
	])('refuses %s', async (_what, make, problem) => {
		const before = await kept();
		const fault = await receiveEvent(...make(), db).catch((error: unknown) => error);
		expect(fault).toBeInstanceOf(RefusedEventError);
		expect((fault as Error).message).toMatch(problem);
		expect(await kept()).toBe(before);
	});

	it('answers what it does not want without keeping it', async () => {
		const before = await kept();
		for (const type of ['invoice.upcoming', 'payout.paid', 'customer.updated']) {
			const { body, header } = signed({ type, data: { object: { object: 'x', id: 'x_1' } } });
			expect(await receiveEvent(body, header, db)).toBe('not of interest');
		}
		expect(await kept()).toBe(before);
	});

	it('answers an event only once it is durable: with the database away it throws', async () => {
		const { body, header } = signed();
		const broken = { transaction: () => Promise.reject(new Error('away')) } as unknown as Database;
		await expect(receiveEvent(body, header, broken)).rejects.toThrow('away');
		expect(await receiveEvent(body, header, db)).toBe('kept');
	});

	it('lays aside what is about somebody else’s customer', async () => {
		const customer = await stripe().customers.create({ name: 'Somebody else' });
		const [price] = (await stripe().prices.list({ lookup_keys: ['noonmark-individual-month'] })).data;
		const card = await stripe().paymentMethods.attach('pm_card_visa', { customer: customer.id });
		await stripe().subscriptions.create({
			customer: customer.id,
			default_payment_method: card.id,
			items: [{ price: price?.id ?? '' }]
		});
		await db.delete(billingEvents).where(eq(billingEvents.objectId, 'sub_invented'));
		await shop.settle();
		const aside = await db.select().from(billingEvents).where(eq(billingEvents.customerId, customer.id));
		expect(aside.length).toBeGreaterThan(2);
		for (const event of aside) {
			expect(event.handledAt).not.toBeNull();
			expect(event.problem).toContain('none of ours');
		}
		expect(await db.$count(subscriptions, eq(subscriptions.customerId, customer.id))).toBe(0);
	});
});

describe('entitlement after events', () => {
	beforeEach(async () => {
		await db.delete(billingEvents).where(eq(billingEvents.objectId, 'sub_invented'));
	});

	it.each(['as made', 'reversed', 'shuffled'] as const)(
		'is right when they come twice and %s',
		async (order) => {
			shop.fake.control.webhooks({ duplicates: 1, order });
			const { subscription } = await subscribe();
			expect(await stands()).toEqual({ left: 16, blocked: false, standing: 'good' });
			await stripe().subscriptions.cancel(subscription);
			await shop.settle();
			expect(await stands()).toEqual({ left: 0, blocked: false, standing: 'over' });
		}
	);

	it('stays over when `created` and `updated` come after `deleted`', async () => {
		shop.fake.control.webhooks({ mode: 'hold' });
		await pay(await startCheckout(owner, practice, db));
		const [{ id } = { id: '' }] = (
			await stripe().subscriptions.list({
				customer: (await customerOf(owner.organisationId, db)) ?? '',
				status: 'all'
			})
		).data;
		await stripe().subscriptions.cancel(id);
		shop.fake.control.release('reversed');
		await shop.settle();
		expect(await stands()).toMatchObject({ left: 0, standing: 'over' });
		// Even where the payment service itself would call it alive again.
		const events = await db.select().from(billingEvents).where(eq(billingEvents.objectId, id));
		const revived = (await stripe().subscriptions.retrieve(id)) as Stripe.Subscription;
		const retrieve = stripe().subscriptions.retrieve;
		stripe().subscriptions.retrieve = () =>
			Promise.resolve({ ...revived, status: 'active', ended_at: null }) as ReturnType<typeof retrieve>;
		try {
			for (const event of events) await followEvent(db, event);
		} finally {
			stripe().subscriptions.retrieve = retrieve;
		}
		expect(await stands()).toMatchObject({ left: 0, standing: 'over' });
	});

	it('denies new exports for a status that is not known, and keeps what was kept', async () => {
		const { subscription } = await subscribe();
		const seen = await stripe().subscriptions.retrieve(subscription);
		const retrieve = stripe().subscriptions.retrieve;
		const strange = { ...seen, status: 'hibernating' };
		stripe().subscriptions.retrieve = () =>
			Promise.resolve(strange) as unknown as ReturnType<typeof retrieve>;
		try {
			for (const event of await db
				.select()
				.from(billingEvents)
				.where(eq(billingEvents.objectId, subscription)))
				await followEvent(db, event);
		} finally {
			stripe().subscriptions.retrieve = retrieve;
		}
		expect(await stands()).toMatchObject({ blocked: true, standing: 'unknown' });
	});

	it('goes through renewal, an unpaid invoice with its days of grace, and its end', async () => {
		const { customer, subscription } = await subscribe();
		// A month later it is renewed and paid.
		shop.fake.control.age({ customer, days: 32 });
		await shop.settle();
		expect(await stands()).toMatchObject({ blocked: false, standing: 'good', left: 16 });
		// The card stops paying before the next renewal.
		const bad = await stripe().paymentMethods.attach('pm_card_chargeCustomerFail', { customer });
		await stripe().customers.update(customer, { invoice_settings: { default_payment_method: bad.id } });
		await stripe().subscriptions.update(subscription, { default_payment_method: bad.id });
		shop.fake.control.age({ customer, days: 31 });
		await shop.settle();
		const { subscription: copy, access } = await standingOf(owner.organisationId, db);
		expect(copy?.status).toBe('past_due');
		expect(access).toMatchObject({ standing: 'grace', allowance: true, blocked: false });
		expect(access?.until?.getTime()).toBe((copy?.paidUntil?.getTime() ?? 0) + 7 * 86_400_000);
		// The period has moved on; what is paid for has not.
		expect(copy?.periodEnd.getTime()).toBeGreaterThan((copy?.paidUntil?.getTime() ?? 0) + 20 * 86_400_000);
		shop.fake.control.age({ customer, days: 8 });
		await shop.settle();
		await reconcile(db, silent);
		expect(await stands()).toMatchObject({ blocked: true });
		// Paid late: exports go through again.
		const [open] = (await stripe().invoices.list({ customer, status: 'open' })).data;
		await stripe().invoices.pay(open?.id ?? '', { payment_method: 'pm_card_visa' });
		await shop.settle();
		expect(await stands()).toMatchObject({ blocked: false, standing: 'good' });
	});

	it('lasts until the end of the period after a cancellation, which can be taken back', async () => {
		const { customer, subscription } = await subscribe();
		await stripe().subscriptions.update(subscription, { cancel_at_period_end: true });
		await shop.settle();
		const { access, subscription: copy } = await standingOf(owner.organisationId, db);
		expect(copy?.cancelAtPeriodEnd).toBe(true);
		expect(access).toMatchObject({ standing: 'good', until: copy?.periodEnd });
		await stripe().subscriptions.update(subscription, { cancel_at_period_end: false });
		await shop.settle();
		expect((await standingOf(owner.organisationId, db)).subscription?.cancelAtPeriodEnd).toBe(false);
		await stripe().subscriptions.update(subscription, { cancel_at_period_end: true });
		shop.fake.control.age({ customer, days: 32 });
		await shop.settle();
		expect(await stands()).toMatchObject({ left: 0, standing: 'over' });
	});
});

describe('the daily comparison', () => {
	it('finds what no event told, mends it, and finds nothing the next time', async () => {
		const { subscription } = await subscribe();
		await reconcile(db, silent);
		shop.fake.control.webhooks({ mode: 'drop' });
		const items = (await stripe().subscriptions.retrieve(subscription)).items.data;
		await stripe().subscriptions.update(subscription, { items: [{ id: items[0]?.id ?? '', quantity: 6 }] });
		expect((await standingOf(owner.organisationId, db)).subscription?.quantity).toBe(2);
		expect(await reconcile(db, silent)).toMatchObject({ subscriptions: 1 });
		expect((await standingOf(owner.organisationId, db)).subscription?.quantity).toBe(6);
		expect(await reconcile(db, silent)).toMatchObject({ subscriptions: 0, events: 0 });
	});

	it('gives a pack whose every event was lost and whose buyer never came back', async () => {
		shop.fake.control.webhooks({ mode: 'drop' });
		await pay(await startCheckout(owner, { packs: 1 }, db));
		await shop.settle();
		expect(await stands()).toMatchObject({ left: 0 });
		await db.execute(sql`update checkouts set started_at = started_at - interval '2 hours'`);
		expect(await reconcile(db, silent)).toMatchObject({ checkouts: 1 });
		expect(await stands()).toMatchObject({ left: 10 });
	});
});
