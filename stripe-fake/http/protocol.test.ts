import Stripe from 'stripe';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { clientOf, customerWithCard, openShop, type Shop } from '../testing/shop';

let shop: Shop;
beforeAll(async () => {
	shop = await openShop();
});
afterAll(() => shop.stop());

/** The fault that a call ends in. */
async function faultOf(call: Promise<unknown>): Promise<Stripe.errors.StripeError> {
	const outcome: unknown = await call.then(
		() => new Error('It succeeded.'),
		(error: unknown) => error
	);
	if (outcome instanceof Stripe.errors.StripeError) return outcome;
	throw outcome;
}

describe('errors, as the SDK sorts them', () => {
	it('refuses a wrong key', async () => {
		const fault = await faultOf(clientOf(shop.fake, {}, 'sk_test_other').customers.list());
		expect(fault).toBeInstanceOf(Stripe.errors.StripeAuthenticationError);
		expect(fault.statusCode).toBe(401);
	});

	it('knows no path but its own, and no parameter', async () => {
		const path = await faultOf(shop.stripe.coupons.list());
		expect(path).toMatchObject({ statusCode: 404, type: 'StripeInvalidRequestError' });
		const params = { name: 'A', nickname: 'B' };
		const unknown = await faultOf(shop.stripe.customers.create(params));
		expect(unknown).toMatchObject({ statusCode: 400, code: 'parameter_unknown', param: 'nickname' });
		const removed = { payment_method_types: ['card'] };
		const old = await faultOf(
			shop.stripe.checkout.sessions.create({
				mode: 'payment',
				line_items: [{ price: shop.pack.id, quantity: 1 }],
				success_url: 'https://shop.example/',
				...removed
			})
		);
		expect(old).toMatchObject({ code: 'parameter_unknown', param: 'payment_method_types' });
	});

	it('names what is missing or malformed', async () => {
		const empty: { name?: string } = {};
		expect(await faultOf(shop.stripe.products.create(Object.assign({ name: '' }, empty)))).toMatchObject({
			code: 'parameter_invalid_empty',
			param: 'name'
		});
		expect(await faultOf(shop.stripe.customers.retrieve('cus_nobody'))).toMatchObject({
			statusCode: 404,
			code: 'resource_missing',
			message: "No such customer: 'cus_nobody'"
		});
		expect(await faultOf(shop.stripe.customers.list({ limit: 101 }))).toMatchObject({ param: 'limit' });
		expect(
			await faultOf(
				shop.stripe.checkout.sessions.create({
					mode: 'subscription',
					ui_mode: 'hosted',
					line_items: [{ price: shop.monthly.id, quantity: 1 }],
					success_url: 'https://shop.example/'
				})
			)
		).toMatchObject({ param: 'ui_mode' });
	});

	it('tells a declined card by its code', async () => {
		const customer = await shop.stripe.customers.create({});
		const fault = await faultOf(
			shop.stripe.paymentMethods.attach('pm_card_chargeDeclinedInsufficientFunds', { customer: customer.id })
		);
		expect(fault).toBeInstanceOf(Stripe.errors.StripeCardError);
		expect(fault).toMatchObject({
			statusCode: 402,
			code: 'card_declined',
			decline_code: 'insufficient_funds'
		});
	});

	it.each([
		[429, 'StripeRateLimitError'],
		[500, 'StripeAPIError'],
		[403, 'StripePermissionError']
	])('fails with %i where it was told to', async (status, type) => {
		shop.fake.control.failNext({ status, path: '/v1/customers' });
		expect(await faultOf(shop.stripe.customers.list())).toMatchObject({ statusCode: status, type });
		expect((await shop.stripe.customers.list()).object).toBe('list');
	});

	it('gives every answer an id, and refuses other versions', async () => {
		const { lastResponse } = await shop.stripe.customers.list();
		expect(lastResponse.requestId).toMatch(/^req_\w+$/);
		expect(lastResponse.apiVersion).toBe('2026-10-28.endive');
		const response = await fetch(`${shop.fake.address}/v1/customers`, {
			headers: { authorization: 'Bearer sk_test_standin', 'stripe-version': '2020-08-27' }
		});
		expect(response.status).toBe(400);
	});
});

describe('retries and idempotency', () => {
	it('is retried by the SDK after a server fault and a cut connection, with one effect', async () => {
		const retrying = clientOf(shop.fake, { maxNetworkRetries: 2 });
		shop.fake.control.failNext({ status: 500, method: 'POST' });
		shop.fake.control.failNext({ reset: true, after: true, method: 'POST' });
		const made = await retrying.customers.create({ email: 'once@reed.example' });
		const found = await retrying.customers.list({ email: 'once@reed.example' });
		expect(found.data.map(({ id }) => id)).toEqual([made.id]);
		const keys = shop.fake.control
			.requests()
			.filter(({ form }) => form.email === 'once@reed.example' && form.limit === undefined)
			.map(({ idempotencyKey }) => idempotencyKey);
		expect(keys.length).toBe(4);
		expect(new Set(keys.filter((each) => each !== null)).size).toBe(1);
	});

	it('replays the first answer of a key', async () => {
		const options = { idempotencyKey: 'customer-of-order-7' };
		const first = await shop.stripe.customers.create({ name: 'Seven' }, options);
		const second = await shop.stripe.customers.create({ name: 'Seven' }, options);
		expect(second.id).toBe(first.id);
		expect(second.lastResponse.headers['idempotent-replayed']).toBe('true');
		expect(second.lastResponse.headers['original-request']).toBe(first.lastResponse.requestId);
	});

	it('refuses a key for other parameters or another path', async () => {
		const options = { idempotencyKey: 'customer-of-order-8' };
		await shop.stripe.customers.create({ name: 'Eight' }, options);
		for (const call of [
			shop.stripe.customers.create({ name: 'Nine' }, options),
			shop.stripe.products.create({ name: 'Eight' }, options)
		]) {
			const fault = await faultOf(call);
			expect(fault).toBeInstanceOf(Stripe.errors.StripeIdempotencyError);
			expect(fault.statusCode).toBe(400);
		}
	});

	it('answers 409 while the first request with a key is still running', async () => {
		shop.fake.control.failNext({ delayMilliseconds: 200, method: 'POST' });
		const options = { idempotencyKey: 'customer-of-order-10' };
		const first = shop.stripe.customers.create({ name: 'Ten' }, options);
		await new Promise((resolve) => setTimeout(resolve, 50));
		expect(await faultOf(shop.stripe.customers.create({ name: 'Ten' }, options))).toMatchObject({
			statusCode: 409,
			code: 'idempotency_key_in_use'
		});
		expect((await first).name).toBe('Ten');
	});

	it('keeps a fault that came while it worked, but no refusal of parameters', async () => {
		const options = { idempotencyKey: 'customer-of-order-11' };
		shop.fake.control.failNext({ status: 500, after: true, method: 'POST' });
		expect(await faultOf(shop.stripe.customers.create({ name: 'E' }, options))).toMatchObject({
			statusCode: 500
		});
		expect(await faultOf(shop.stripe.customers.create({ name: 'E' }, options))).toMatchObject({
			statusCode: 500
		});
		const refused = { idempotencyKey: 'customer-of-order-12' };
		const wrong = { metadata: { ['k'.repeat(41)]: 'v' } };
		expect(await faultOf(shop.stripe.customers.create(wrong, refused))).toMatchObject({ statusCode: 400 });
		expect((await shop.stripe.customers.create({ name: 'T' }, refused)).name).toBe('T');
	});

	it('keeps a declined payment as the answer of its key', async () => {
		const customer = await customerWithCard(shop, 'pm_card_chargeCustomerFail');
		const options = { idempotencyKey: 'subscription-of-order-13' };
		const ask = () =>
			shop.stripe.subscriptions.create(
				{
					customer: customer.id,
					items: [{ price: shop.monthly.id }],
					payment_behavior: 'error_if_incomplete'
				},
				options
			);
		expect(await faultOf(ask())).toMatchObject({ statusCode: 402 });
		expect(await faultOf(ask())).toMatchObject({ statusCode: 402, code: 'card_declined' });
		expect((await shop.stripe.subscriptions.list({ customer: customer.id, status: 'all' })).data).toEqual([]);
	});
});

describe('expand', () => {
	it('puts objects in place of ids, also in lists and below each other', async () => {
		const customer = await customerWithCard(shop);
		const made = await shop.stripe.subscriptions.create({
			customer: customer.id,
			items: [{ price: shop.monthly.id, quantity: 2 }],
			expand: ['customer', 'latest_invoice.payments']
		});
		expect(made.customer).toMatchObject({ object: 'customer', id: customer.id });
		expect(made.latest_invoice).toMatchObject({
			object: 'invoice',
			payments: { data: [{ object: 'invoice_payment', amount_paid: 8000 }] }
		});
		const prices = await shop.stripe.prices.list({
			lookup_keys: ['practice_month'],
			expand: ['data.product']
		});
		expect(prices.data).toMatchObject([{ product: { object: 'product', name: 'Practice' } }]);
	});

	it('leaves fields out that were not asked for', async () => {
		const customer = await customerWithCard(shop);
		const made = await shop.stripe.subscriptions.create({
			customer: customer.id,
			items: [{ price: shop.monthly.id }],
			expand: ['latest_invoice']
		});
		expect(made.latest_invoice).not.toHaveProperty('payments');
		expect(await shop.stripe.customers.retrieve(customer.id)).not.toHaveProperty('subscriptions');
	});

	it('refuses what cannot be expanded or is too deep, and then does nothing', async () => {
		const email = 'unexpanded@reed.example';
		expect(await faultOf(shop.stripe.customers.create({ email, expand: ['shoe_size'] }))).toMatchObject({
			statusCode: 400,
			message: 'This property cannot be expanded (shoe_size).'
		});
		expect((await shop.stripe.customers.list({ email })).data).toEqual([]);
		expect(await faultOf(shop.stripe.customers.list({ expand: ['data.a.b.c.d.e'] }))).toMatchObject({
			code: 'property_expansion_max_depth'
		});
	});
});

describe('lists', () => {
	it('come newest first, in pages of the asked size', async () => {
		const own = await openShop();
		for (let number = 1; number <= 12; number += 1) await own.stripe.customers.create({ name: `N${number}` });
		const names = (list: Stripe.ApiList<Stripe.Customer>) => list.data.map(({ name }) => name);
		const first = await own.stripe.customers.list();
		expect(names(first)).toEqual([12, 11, 10, 9, 8, 7, 6, 5, 4, 3].map((number) => `N${number}`));
		expect(first.has_more).toBe(true);
		const rest = await own.stripe.customers.list({ starting_after: first.data[9]?.id });
		expect(names(rest)).toEqual(['N2', 'N1']);
		expect(rest.has_more).toBe(false);
		const back = await own.stripe.customers.list({ ending_before: rest.data[0]?.id, limit: 2 });
		expect(names(back)).toEqual(['N4', 'N3']);
		expect(back.has_more).toBe(true);
		const all = await own.stripe.customers.list({ limit: 5 }).autoPagingToArray({ limit: 100 });
		expect(all.map(({ name }) => name)).toEqual(
			[12, 11, 10, 9, 8, 7, 6, 5, 4, 3, 2, 1].map((number) => `N${number}`)
		);
		expect(await faultOf(own.stripe.customers.list({ starting_after: 'cus_nobody' }))).toMatchObject({
			code: 'resource_missing',
			param: 'starting_after'
		});
		const now = Math.floor(Date.now() / 1000);
		expect((await own.stripe.customers.list({ created: { gt: now + 60 } })).data).toEqual([]);
		expect((await own.stripe.customers.list({ created: { gte: now - 60 }, limit: 100 })).data.length).toBe(
			12
		);
		await own.stop();
	});
});
