import Stripe from 'stripe';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import {
	checkoutFor,
	customerWithCard,
	eventTypes,
	good,
	idOf,
	itemOf,
	openPage,
	openShop,
	payWith,
	post,
	type Shop
} from '../testing/shop';

let shop: Shop;
beforeAll(async () => {
	shop = await openShop();
});
afterAll(() => shop.stop());

const again = (session: Stripe.Checkout.Session) => shop.stripe.checkout.sessions.retrieve(session.id);

describe('a subscription', () => {
	it('comes into being only when the card pays', async () => {
		const customer = await shop.stripe.customers.create({ email: 'pay@tallis.example' });
		const session = await checkoutFor(shop, {
			customer: customer.id,
			client_reference_id: 'organisation-7',
			metadata: { organisation: '7' },
			subscription_data: { metadata: { organisation: '7', plan: 'practice' } }
		});
		expect(session).toMatchObject({
			status: 'open',
			payment_status: 'unpaid',
			ui_mode: 'hosted_page',
			amount_total: 12_000,
			client_reference_id: 'organisation-7',
			subscription: null,
			payment_intent: null
		});
		expect(session.id).toMatch(/^cs_test_\w+$/);
		expect(session).not.toHaveProperty('line_items');
		const before = (await eventTypes(shop)).length;

		const refused = await payWith(session.url, '4000 0000 0000 0002');
		expect(refused.status).toBe(402);
		expect(refused.text).toContain('Your card was declined. Nothing was paid. You can try another card.');
		expect(await eventTypes(shop, before)).toEqual([]);
		expect((await shop.stripe.subscriptions.list({ customer: customer.id, status: 'all' })).data).toEqual([]);
		expect(await again(session)).toMatchObject({ status: 'open', subscription: null });

		const paid = await payWith(session.url, good);
		expect(paid).toMatchObject({
			status: 303,
			location: `https://shop.example/done?session=${session.id}`
		});
		const done = await shop.stripe.checkout.sessions.retrieve(session.id, {
			expand: ['line_items', 'subscription.latest_invoice']
		});
		expect(done).toMatchObject({
			status: 'complete',
			payment_status: 'paid',
			url: null,
			customer: customer.id,
			customer_details: { email: 'pay@tallis.example', name: 'Ada Reed' },
			line_items: { data: [{ quantity: 3, amount_total: 12_000, price: { id: shop.monthly.id } }] },
			subscription: {
				status: 'active',
				metadata: { organisation: '7', plan: 'practice' },
				latest_invoice: {
					status: 'paid',
					billing_reason: 'subscription_create',
					amount_paid: 12_000,
					parent: {
						type: 'subscription_details',
						subscription_details: { metadata: { organisation: '7', plan: 'practice' } }
					}
				}
			}
		});
		const types = await eventTypes(shop, before);
		for (const type of [
			'checkout.session.completed',
			'customer.subscription.created',
			'invoice.created',
			'invoice.finalized',
			'invoice.paid',
			'invoice.payment_succeeded',
			'payment_intent.succeeded',
			'charge.succeeded'
		])
			expect(
				types.filter((each) => each === type),
				type
			).toEqual([type]);
		const subscription = await shop.stripe.subscriptions.retrieve(idOf(done.subscription));
		expect(subscription).not.toHaveProperty('current_period_end');
		const item = itemOf(subscription);
		expect(item.quantity).toBe(3);
		expect(item.current_period_end - item.current_period_start).toBeGreaterThanOrEqual(28 * 86_400);
	});

	it('makes a customer for somebody who comes without', async () => {
		const session = await checkoutFor(shop);
		await payWith(session.url, good);
		const done = await again(session);
		expect(await shop.stripe.customers.retrieve(idOf(done.customer))).toMatchObject({
			email: 'ada@reed.example',
			name: 'Ada Reed'
		});
	});

	it('is not paid twice, and not paid once it has expired', async () => {
		const session = await checkoutFor(shop);
		const address = session.url;
		await payWith(address, good);
		const subscription = (await again(session)).subscription;
		const second = await payWith(address, good);
		expect(second.text).toContain('This was paid');
		expect((await again(session)).subscription).toBe(subscription);

		const late = await checkoutFor(shop);
		expect((await shop.stripe.checkout.sessions.expire(late.id)).status).toBe('expired');
		expect(await payWith(late.url, good)).toMatchObject({ status: 410 });
		await expect(shop.stripe.checkout.sessions.expire(late.id)).rejects.toMatchObject({ statusCode: 400 });
		expect((await again(late)).subscription).toBeNull();
	});
});

describe('a pack, bought once', () => {
	it('is paid with an intent that carries the metadata', async () => {
		const customer = await customerWithCard(shop);
		const session = await checkoutFor(shop, {
			mode: 'payment',
			customer: customer.id,
			payment_intent_data: { metadata: { pack: '10' } }
		});
		const refused = await payWith(session.url, '4000 0000 0000 9995');
		expect(refused.text).toContain('Your card has insufficient funds.');
		expect((await again(session)).status).toBe('open');
		expect(await payWith(session.url, good)).toMatchObject({ status: 303 });
		const done = await shop.stripe.checkout.sessions.retrieve(session.id, {
			expand: ['payment_intent.latest_charge']
		});
		expect(done).toMatchObject({
			payment_status: 'paid',
			subscription: null,
			payment_intent: {
				status: 'succeeded',
				amount_received: 27_000,
				metadata: { pack: '10' },
				latest_charge: { paid: true, refunded: false, metadata: { pack: '10' } }
			}
		});
		const lines = await shop.stripe.checkout.sessions.listLineItems(session.id);
		expect(lines.data.map(({ quantity }) => quantity)).toEqual([3]);
	});

	it('takes no recurring price', async () => {
		await expect(
			checkoutFor(shop, { mode: 'payment', line_items: [{ price: shop.monthly.id, quantity: 1 }] })
		).rejects.toMatchObject({ param: 'line_items[0][price]' });
	});
});

describe('cards', () => {
	it.each([
		['4000 0000 0000 9987', 'Your card was declined.'],
		['4000 0000 0000 9979', 'Your card was declined.'],
		['4000 0000 0000 0069', 'Your card has expired.'],
		['4000 0000 0000 0127', 'Your card&#39;s security code is incorrect.'],
		['4000 0000 0000 0119', 'An error occurred while processing your card.'],
		['4111 1111 1111 1111', 'Never type a real card in here.'],
		['', 'Type a card number.']
	])('%s leaves the session open and says why', async (number, words) => {
		const session = await checkoutFor(shop);
		const refused = await payWith(session.url, number);
		expect(refused.status).toBeGreaterThanOrEqual(400);
		expect(refused.text).toContain(words);
		expect((await again(session)).status).toBe('open');
	});

	it('asks for a plausible expiry and security code', async () => {
		const session = await checkoutFor(shop);
		const typed = { card: good, expiry: '12/40', cvc: '123', name: 'A', email: 'a@b.example' };
		expect((await post(session.url ?? '', { ...typed, expiry: '01/20' })).text).toContain('has expired');
		expect((await post(session.url ?? '', { ...typed, expiry: 'soon' })).text).toContain('like 12/34');
		expect((await post(session.url ?? '', { ...typed, cvc: '1' })).text).toContain('three digits');
	});

	it.each([
		['4000 0025 0000 3155', 'complete'],
		['4000 0027 6000 3184', 'complete'],
		['4000 0038 0000 0446', 'complete'],
		['4000 0082 6000 3178', 'open'],
		['4000 0084 0000 1629', 'open']
	])('%s asks for a confirmation, after which the session is %s', async (number, status) => {
		const session = await checkoutFor(shop);
		const asked = await payWith(session.url, number);
		expect(asked).toMatchObject({ status: 303, location: `/checkout/${session.id}/confirm` });
		const question = `${shop.fake.address}${asked.location ?? ''}`;
		expect((await openPage(question)).text).toContain('Confirm the payment');
		expect((await again(session)).status).toBe('open');
		const answered = await post(question, { answer: 'yes' });
		expect(answered.status).toBe(status === 'complete' ? 303 : 402);
		expect((await again(session)).status).toBe(status);
	});

	it('lets the customer refuse the confirmation and try another card', async () => {
		const session = await checkoutFor(shop);
		await payWith(session.url, '4000 0027 6000 3184');
		const refused = await post(`${session.url}/confirm`, { answer: 'no' });
		expect(refused.text).toContain('Nothing was paid.');
		expect(await payWith(session.url, good)).toMatchObject({ status: 303 });
	});
});

describe('the page', () => {
	it('says what it is, what is to be paid, and how to go back', async () => {
		const session = await checkoutFor(shop);
		const { status, text } = await openPage(session.url ?? '');
		expect(status).toBe(200);
		expect(text).toContain('takes no money');
		expect(text).toContain('EUR 120.00');
		expect(text).toContain('<a href="https://shop.example/plans">Back without paying</a>');
		expect(text).toContain('4000 0000 0000 0341');
		expect(text).not.toContain('<script');
	});

	it('shows what names hold as text', async () => {
		const product = await shop.stripe.products.create({ name: '<b>Bold</b>' });
		const price = await shop.stripe.prices.create({ product: product.id, currency: 'eur', unit_amount: 100 });
		const session = await checkoutFor(shop, {
			mode: 'payment',
			line_items: [{ price: price.id, quantity: 1 }]
		});
		expect((await openPage(session.url ?? '')).text).toContain('&#60;b&#62;Bold');
	});

	it('is not there for an unknown session', async () => {
		expect(await openPage(`${shop.fake.address}/checkout/cs_test_none`)).toMatchObject({ status: 404 });
	});
});
