import Stripe from 'stripe';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import {
	checkoutFor,
	customerWithCard,
	eventTypes,
	idOf,
	itemOf,
	openShop,
	payWith,
	type Shop
} from '../testing/shop';

let shop: Shop;
beforeEach(async () => {
	shop = await openShop();
});
afterEach(() => shop.stop());

/** Subscribed on the checkout page. */
async function subscribed(card: string): Promise<Stripe.Subscription> {
	const session = await checkoutFor(shop);
	const paid = await payWith(session.url, card);
	if (paid.location?.endsWith('/confirm') === true)
		await fetch(`${session.url}/confirm`, {
			method: 'POST',
			redirect: 'manual',
			body: new URLSearchParams({ answer: 'yes' })
		});
	const done = await shop.stripe.checkout.sessions.retrieve(session.id, { expand: ['subscription'] });
	if (typeof done.subscription !== 'object' || done.subscription === null)
		throw new Error('It did not become a subscription.');
	return done.subscription;
}

const now = (subscription: Stripe.Subscription) => shop.stripe.subscriptions.retrieve(subscription.id);

const invoicesOf = async (subscription: Stripe.Subscription) =>
	(await shop.stripe.invoices.list({ subscription: subscription.id })).data;

/** Moves the customer's clock to a time after the end of the period. */
function pass(subscription: Stripe.Subscription, days: number, hours = 0): void {
	const customer = idOf(subscription.customer);
	const target = itemOf(subscription).current_period_end + days * 86_400 + hours * 3600;
	const { now: at } = shop.fake.control.advance({ customer, seconds: 0 });
	shop.fake.control.advance({ customer, seconds: target - at });
}

describe('renewal', () => {
	it('moves the period and drafts an invoice, which is collected an hour later', async () => {
		const subscription = await subscribed('4242 4242 4242 4242');
		const before = (await eventTypes(shop)).length;
		pass(subscription, 0, 0.5);
		const renewed = await now(subscription);
		expect(itemOf(renewed).current_period_start).toBe(itemOf(subscription).current_period_end);
		expect((await invoicesOf(subscription))[0]).toMatchObject({ status: 'draft', number: null });
		expect(await eventTypes(shop, before)).toEqual(['customer.subscription.updated', 'invoice.created']);
		pass(subscription, 0, 1.5);
		const [invoice] = await invoicesOf(subscription);
		expect(invoice).toMatchObject({
			status: 'paid',
			billing_reason: 'subscription_cycle',
			amount_paid: 12_000,
			attempt_count: 1,
			lines: {
				data: [
					{
						period: {
							start: itemOf(renewed).current_period_start,
							end: itemOf(renewed).current_period_end
						}
					}
				]
			}
		});
		expect(await eventTypes(shop, before + 2)).toEqual([
			'invoice.finalized',
			'payment_intent.created',
			'charge.succeeded',
			'payment_intent.succeeded',
			'invoice_payment.paid',
			'invoice.paid',
			'invoice.payment_succeeded'
		]);
		expect((await now(subscription)).status).toBe('active');
	});

	it('goes on month after month', async () => {
		const subscription = await subscribed('4242 4242 4242 4242');
		pass(subscription, 100);
		const invoices = await invoicesOf(subscription);
		expect(invoices.map(({ status }) => status)).toEqual(['paid', 'paid', 'paid', 'paid', 'paid']);
		expect(new Set(invoices.map(({ number }) => number)).size).toBe(5);
	});

	it('pays without the customer with a card that was confirmed once, unless it asks each time', async () => {
		const once = await subscribed('4000 0025 0000 3155');
		pass(once, 1);
		expect((await now(once)).status).toBe('active');
		const already = await subscribed('4000 0038 0000 0446');
		pass(already, 1);
		expect((await now(already)).status).toBe('active');
		const always = await subscribed('4000 0027 6000 3184');
		const before = (await eventTypes(shop)).length;
		pass(always, 1);
		expect((await now(always)).status).toBe('past_due');
		expect(await eventTypes(shop, before)).toContain('invoice.payment_action_required');
	});

	it('falls due by the real clock where the past is moved back', async () => {
		const subscription = await subscribed('4242 4242 4242 4242');
		shop.fake.control.age({ customer: idOf(subscription.customer), days: 32 });
		const item = itemOf(await now(subscription));
		const time = Date.now() / 1000;
		expect(item.current_period_start).toBeLessThanOrEqual(time);
		expect(item.current_period_end).toBeGreaterThan(time);
		expect((await invoicesOf(subscription)).map(({ status }) => status)).toEqual(['paid', 'paid']);
	});
});

describe('dunning', () => {
	const failing = '4000 0000 0000 0341';

	it('is past due, tried three times more, and then canceled', async () => {
		const subscription = await subscribed(failing);
		expect(subscription.status).toBe('active');
		const before = (await eventTypes(shop)).length;
		pass(subscription, 0, 2);
		expect((await now(subscription)).status).toBe('past_due');
		const [invoice] = await invoicesOf(subscription);
		expect(invoice).toMatchObject({ status: 'open', attempt_count: 1, attempted: true });
		const collected = itemOf(subscription).current_period_end + 3600;
		expect(invoice?.next_payment_attempt).toBe(collected + 3 * 86_400);
		const types = await eventTypes(shop, before);
		for (const type of ['charge.failed', 'payment_intent.payment_failed', 'invoice.payment_failed'])
			expect(types).toContain(type);
		expect(types).not.toContain('invoice.paid');
		pass(subscription, 9);
		expect((await invoicesOf(subscription))[0]).toMatchObject({ attempt_count: 3 });
		expect((await now(subscription)).status).toBe('past_due');
		pass(subscription, 16);
		expect((await invoicesOf(subscription))[0]).toMatchObject({
			attempt_count: 4,
			next_payment_attempt: null
		});
		expect(await now(subscription)).toMatchObject({
			status: 'canceled',
			cancellation_details: { reason: 'payment_failed' }
		});
	});

	it('ends as unpaid where the account says so; then nobody collects, and a payment brings it back', async () => {
		shop.fake.control.settings({ dunning: { end: 'unpaid', retryDays: [1] } });
		const subscription = await subscribed(failing);
		pass(subscription, 2);
		expect((await now(subscription)).status).toBe('unpaid');
		pass(subscription, 35);
		const [draft, open] = await invoicesOf(subscription);
		expect(draft).toMatchObject({ status: 'draft', auto_advance: false });
		expect(open).toMatchObject({ status: 'open' });
		await shop.stripe.invoices.pay(draft?.id ?? '', { payment_method: 'pm_card_visa' });
		expect((await now(subscription)).status).toBe('active');
	});

	it('comes back when the open invoice is paid on its page', async () => {
		const subscription = await subscribed(failing);
		pass(subscription, 1);
		const [invoice] = await invoicesOf(subscription);
		const address = invoice?.hosted_invoice_url ?? '';
		const refused = await payWith(address, '4000 0000 0000 0002');
		expect(refused.status).toBe(402);
		expect((await payWith(address, '4242 4242 4242 4242')).status).toBe(303);
		expect((await invoicesOf(subscription))[0]?.status).toBe('paid');
		const back = await now(subscription);
		expect(back.status).toBe('active');
		pass(back, 1);
		expect((await invoicesOf(subscription)).map(({ status }) => status)).toEqual(['paid', 'paid', 'paid']);
	});

	it('does not ask again after a final no, and gives up when the last attempt would have been', async () => {
		const subscription = await subscribed('4242 4242 4242 4242');
		await shop.stripe.subscriptions.update(subscription.id, { default_payment_method: '' });
		pass(subscription, 1);
		expect((await now(subscription)).status).toBe('past_due');
		expect((await invoicesOf(subscription))[0]).toMatchObject({ next_payment_attempt: null, status: 'open' });
		pass(subscription, 16);
		expect((await now(subscription)).status).toBe('canceled');
	});
});

describe('a session for checkout', () => {
	it('expires after a day', async () => {
		const session = await checkoutFor(shop);
		shop.fake.control.advance({ days: 0.9 });
		expect((await shop.stripe.checkout.sessions.retrieve(session.id)).status).toBe('open');
		shop.fake.control.advance({ days: 0.2 });
		expect(await shop.stripe.checkout.sessions.retrieve(session.id)).toMatchObject({
			status: 'expired',
			url: null
		});
		expect(await eventTypes(shop)).toContain('checkout.session.expired');
	});
});

it('a customer with a card of their own clock leaves others alone', async () => {
	const one = await customerWithCard(shop);
	const other = await customerWithCard(shop);
	const made = await Promise.all(
		[one, other].map((customer) =>
			shop.stripe.subscriptions.create({ customer: customer.id, items: [{ price: shop.monthly.id }] })
		)
	);
	shop.fake.control.advance({ customer: one.id, days: 40 });
	const counts = await Promise.all(
		made.map(async ({ id }) => (await shop.stripe.invoices.list({ subscription: id })).data.length)
	);
	expect(counts).toEqual([2, 1]);
});
