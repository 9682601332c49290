import Stripe from 'stripe';
import { afterEach, beforeEach, expect, it } from 'vitest';
import {
	checkoutFor,
	good,
	openShop,
	payWith,
	startReceiver,
	webhookSecret,
	type Receiver,
	type Shop
} from '../testing/shop';

let receiver: Receiver;
let shop: Shop;
beforeEach(async () => {
	receiver = await startReceiver();
	shop = await openShop({
		webhook: {
			url: receiver.url,
			secret: webhookSecret,
			retrySeconds: [0.05, 0.05],
			timeoutMilliseconds: 500
		}
	});
	await shop.fake.control.settle();
	receiver.received.splice(0);
});
afterEach(async () => {
	await shop.stop();
	await receiver.stop();
});

async function until(condition: () => boolean): Promise<void> {
	const deadline = Date.now() + 5000;
	while (!condition()) {
		if (Date.now() > deadline) throw new Error('It did not happen in time.');
		await new Promise((resolve) => setTimeout(resolve, 10));
	}
}

const construct = (index = 0, secret = webhookSecret): Stripe.Event => {
	const { body = '', signature = '' } = receiver.received[index] ?? {};
	return shop.stripe.webhooks.constructEvent(body, signature, secret);
};

it('sends every event signed, as the SDK checks it', async () => {
	const session = await checkoutFor(shop);
	await payWith(session.url, good);
	await shop.fake.control.settle();
	const events = receiver.received.map((_, index) => construct(index));
	const completed = events.find(({ type }) => type === 'checkout.session.completed');
	expect(completed).toMatchObject({
		object: 'event',
		livemode: false,
		api_version: '2026-10-28.endive',
		data: { object: { id: session.id, status: 'complete', payment_status: 'paid' } }
	});
	expect(new Set(receiver.types())).toContain('invoice.paid');
	expect(() => construct(0, 'whsec_other')).toThrow(Stripe.errors.StripeSignatureVerificationError);
	expect(new Set(events.map(({ id }) => id)).size).toBe(events.length);
	const [first] = events;
	expect((await shop.stripe.events.retrieve(first?.id ?? '')).pending_webhooks).toBe(0);
});

it('tells which request caused it, what changed, and the object as it was', async () => {
	const customer = await shop.stripe.customers.create({ name: 'Before' });
	const { lastResponse } = await shop.stripe.customers.update(
		customer.id,
		{ name: 'After' },
		{ idempotencyKey: 'rename-7' }
	);
	await shop.stripe.customers.update(customer.id, { name: 'Later' });
	await shop.fake.control.settle();
	const events = receiver.received.map((_, index) => construct(index));
	const renamed = events.find(({ request }) => request?.idempotency_key === 'rename-7');
	expect(renamed).toMatchObject({
		type: 'customer.updated',
		request: { id: lastResponse.requestId },
		data: { object: { name: 'After' }, previous_attributes: { name: 'Before' } }
	});
});

it('comes after the answer', async () => {
	const made = await shop.stripe.customers.create({});
	expect(made.id).toMatch(/^cus_/);
	await until(() => receiver.received.length === 1);
	expect(construct().type).toBe('customer.created');
});

it('is sent again after a failure, the same event each time, and given up in the end', async () => {
	receiver.answers.push(500, 302, 200);
	await shop.stripe.customers.create({});
	await until(() => receiver.received.length === 3);
	expect(new Set([0, 1, 2].map((index) => construct(index).id)).size).toBe(1);
	await until(() => shop.fake.control.deliveries().at(-1)?.state === 'delivered');
	receiver.answers.push(500, 500, 500);
	await shop.stripe.customers.create({});
	await until(() => shop.fake.control.deliveries().at(-1)?.state === 'given up');
	expect(
		shop.fake.control
			.deliveries()
			.at(-1)
			?.attempts.map(({ status }) => status)
	).toEqual([500, 500, 500]);
	const undelivered = await shop.stripe.events.list({ delivery_success: false });
	expect(undelivered.data.map(({ type }) => type)).toEqual(['customer.created']);
});

it('can be held and released in another order, doubled and dropped', async () => {
	shop.fake.control.webhooks({ mode: 'hold', atOnce: 1 });
	for (const name of ['one', 'two', 'three']) await shop.stripe.customers.create({ name });
	await shop.fake.control.settle();
	expect(receiver.received).toEqual([]);
	expect(shop.fake.control.release('reversed')).toBe(3);
	await shop.fake.control.settle();
	const names = receiver.received.map(({ body }) => {
		const event = JSON.parse(body) as { data: { object: { name: string } } };
		return event.data.object.name;
	});
	expect(names).toEqual(['three', 'two', 'one']);

	receiver.received.splice(0);
	shop.fake.control.webhooks({ duplicates: 1 });
	await shop.stripe.customers.create({});
	await shop.fake.control.settle();
	expect(receiver.received.length).toBe(2);
	expect(construct(0).id).toBe(construct(1).id);

	receiver.received.splice(0);
	shop.fake.control.webhooks({ mode: 'drop' });
	await shop.stripe.customers.create({ name: 'lost' });
	await shop.fake.control.settle();
	expect(receiver.received).toEqual([]);
	const [lost] = (await shop.stripe.events.list({ limit: 1 })).data;
	expect(lost?.type).toBe('customer.created');
});

it('can be delayed', async () => {
	shop.fake.control.webhooks({ delayMilliseconds: 150 });
	const began = Date.now();
	await shop.stripe.customers.create({});
	await shop.fake.control.settle();
	expect(receiver.received.length).toBe(1);
	expect(Date.now() - began).toBeGreaterThanOrEqual(140);
});

it('can be sent once more, with another time, secret or body', async () => {
	await shop.stripe.customers.create({});
	await shop.fake.control.settle();
	const { id } = construct();
	expect(await shop.fake.control.redeliver(id)).toBe(200);
	expect(construct(1).id).toBe(id);
	await shop.fake.control.redeliver(id, { at: Math.floor(Date.now() / 1000) - 600 });
	expect(() => construct(2)).toThrow('Timestamp outside the tolerance zone');
	await shop.fake.control.redeliver(id, { secret: 'whsec_wrong' });
	expect(() => construct(3)).toThrow(Stripe.errors.StripeSignatureVerificationError);
	await shop.fake.control.redeliver(id, { body: '{"id":"evt_forged"}' });
	expect(() => construct(4)).toThrow(Stripe.errors.StripeSignatureVerificationError);
});

it('lists events since a time, by type', async () => {
	const since = Math.floor(Date.now() / 1000);
	await shop.stripe.customers.create({});
	const found = await shop.stripe.events.list({ created: { gte: since }, types: ['customer.*'] });
	expect(found.data.map(({ type }) => type)).toEqual(['customer.created']);
	expect((await shop.stripe.events.list({ created: { gt: since + 60 } })).data).toEqual([]);
});
