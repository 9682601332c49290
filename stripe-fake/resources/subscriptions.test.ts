import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { customerWithCard, eventTypes, idOf, itemOf, openShop, type Shop } from '../testing/shop';

let shop: Shop;
beforeAll(async () => {
	shop = await openShop();
});
afterAll(() => shop.stop());

async function subscribe(quantity = 2, card?: string) {
	const customer = await customerWithCard(shop, card);
	const subscription = await shop.stripe.subscriptions.create({
		customer: customer.id,
		items: [{ price: shop.monthly.id, quantity }]
	});
	return { customer, subscription };
}

const half = { days: 15 };

describe('a new one', () => {
	it('is active once its first invoice is paid', async () => {
		const { subscription, customer } = await subscribe();
		expect(subscription).toMatchObject({
			status: 'active',
			currency: 'eur',
			billing_mode: { type: 'flexible' },
			items: { data: [{ quantity: 2, price: { id: shop.monthly.id }, plan: { amount: 4000 } }] }
		});
		const invoice = await shop.stripe.invoices.retrieve(idOf(subscription.latest_invoice), {
			expand: ['payments', 'confirmation_secret']
		});
		expect(invoice).toMatchObject({ status: 'paid', total: 8000, customer: customer.id });
		expect(invoice.number).toMatch(/^[0-9A-Z]{8}-0001$/);
		expect(invoice.payments?.data).toMatchObject([{ status: 'paid', amount_paid: 8000 }]);
		expect(invoice.lines.data).toMatchObject([
			{
				amount: 8000,
				quantity: 2,
				pricing: { price_details: { price: shop.monthly.id } },
				parent: {
					type: 'subscription_item_details',
					subscription_item_details: { proration: false, subscription: subscription.id }
				}
			}
		]);
	});

	it('needs a card, unless the first payment is left to later', async () => {
		const customer = await shop.stripe.customers.create({});
		const items = [{ price: shop.monthly.id }];
		await expect(shop.stripe.subscriptions.create({ customer: customer.id, items })).rejects.toMatchObject({
			code: 'resource_missing'
		});
		const later = await shop.stripe.subscriptions.create({
			customer: customer.id,
			items,
			payment_behavior: 'default_incomplete',
			expand: ['latest_invoice.confirmation_secret']
		});
		expect(later.status).toBe('incomplete');
		expect(later.latest_invoice).toMatchObject({
			status: 'open',
			confirmation_secret: {
				type: 'payment_intent',
				client_secret: expect.stringMatching(/^pi_\w+_secret_\w+$/)
			}
		});
	});

	it('is incomplete where the card is declined, and expires after 23 hours', async () => {
		const { subscription, customer } = await subscribe(1, 'pm_card_chargeCustomerFail');
		expect(subscription.status).toBe('incomplete');
		shop.fake.control.advance({ customer: customer.id, seconds: 22 * 3600 });
		expect((await shop.stripe.subscriptions.retrieve(subscription.id)).status).toBe('incomplete');
		shop.fake.control.advance({ customer: customer.id, seconds: 3700 });
		expect((await shop.stripe.subscriptions.retrieve(subscription.id)).status).toBe('incomplete_expired');
		expect((await shop.stripe.invoices.retrieve(idOf(subscription.latest_invoice))).status).toBe('void');
	});

	it('becomes active when its invoice is paid with another card', async () => {
		const { subscription } = await subscribe(1, 'pm_card_chargeCustomerFail');
		const invoice = idOf(subscription.latest_invoice);
		await expect(shop.stripe.invoices.pay(invoice)).rejects.toMatchObject({ code: 'card_declined' });
		expect((await shop.stripe.invoices.pay(invoice, { payment_method: 'pm_card_visa' })).status).toBe('paid');
		expect((await shop.stripe.subscriptions.retrieve(subscription.id)).status).toBe('active');
		await expect(shop.stripe.invoices.pay(invoice)).rejects.toMatchObject({ statusCode: 400 });
	});

	it('takes no price that is paid once', async () => {
		const customer = await customerWithCard(shop);
		await expect(
			shop.stripe.subscriptions.create({ customer: customer.id, items: [{ price: shop.pack.id }] })
		).rejects.toMatchObject({ param: 'items[0][price]' });
	});
});

describe('a change of seats', () => {
	it('prorates to the second and bills with the next invoice', async () => {
		const { subscription, customer } = await subscribe(2);
		const item = itemOf(subscription);
		const at = item.current_period_start + 10 * 86_400;
		const span = item.current_period_end - item.current_period_start;
		const left = (item.current_period_end - at) / span;
		const changed = await shop.stripe.subscriptions.update(subscription.id, {
			items: [{ id: item.id, quantity: 5 }],
			proration_date: at
		});
		expect(itemOf(changed)).toMatchObject({ id: item.id, quantity: 5 });
		expect(changed.latest_invoice).toBe(subscription.latest_invoice);
		const next = await shop.stripe.invoices.createPreview({ subscription: subscription.id });
		expect(next.lines.data.map(({ amount }) => amount)).toEqual([
			-Math.round(8000 * left),
			Math.round(20_000 * left),
			20_000
		]);
		expect(next.lines.data[0]?.parent?.subscription_item_details?.proration).toBe(true);
		shop.fake.control.advance({ customer: customer.id, seconds: span + 3700 });
		const [renewal] = (await shop.stripe.invoices.list({ subscription: subscription.id })).data;
		expect(renewal).toMatchObject({
			status: 'paid',
			billing_reason: 'subscription_cycle',
			total: next.total
		});
	});

	it('bills at once where asked to, as the preview said', async () => {
		const { subscription, customer } = await subscribe(2);
		const item = itemOf(subscription);
		shop.fake.control.advance({ customer: customer.id, ...half });
		const preview = await shop.stripe.invoices.createPreview({
			customer: customer.id,
			subscription: subscription.id,
			subscription_details: { items: [{ id: item.id, quantity: 4 }], proration_behavior: 'always_invoice' }
		});
		expect(preview.lines.data.length).toBe(2);
		expect(preview.total).toBeGreaterThan(3000);
		const before = (await eventTypes(shop)).length;
		const changed = await shop.stripe.subscriptions.update(subscription.id, {
			items: [{ id: item.id, quantity: 4 }],
			proration_behavior: 'always_invoice',
			expand: ['latest_invoice']
		});
		expect(changed.latest_invoice).toMatchObject({ status: 'paid', billing_reason: 'subscription_update' });
		const total = (await shop.stripe.invoices.retrieve(idOf(changed.latest_invoice))).total;
		expect(Math.abs(total - preview.total)).toBeLessThanOrEqual(1);
		expect(await eventTypes(shop, before)).toContain('customer.subscription.updated');
	});

	it('keeps a credit for fewer seats and uses it up', async () => {
		const { subscription, customer } = await subscribe(10);
		const item = itemOf(subscription);
		const changed = await shop.stripe.subscriptions.update(subscription.id, {
			items: [{ id: item.id, quantity: 1 }],
			proration_behavior: 'always_invoice',
			expand: ['latest_invoice']
		});
		expect(changed.latest_invoice).toMatchObject({ status: 'paid', amount_due: 0, total: -36_000 });
		expect(await shop.stripe.customers.retrieve(customer.id)).toMatchObject({ balance: -36_000 });
		shop.fake.control.advance({ customer: customer.id, days: 33 });
		const [renewal] = (await shop.stripe.invoices.list({ customer: customer.id })).data;
		expect(renewal).toMatchObject({ status: 'paid', total: 4000, amount_due: 0, starting_balance: -36_000 });
		expect(await shop.stripe.customers.retrieve(customer.id)).toMatchObject({ balance: -32_000 });
	});

	it('costs nothing without proration, and adds an item where the id was forgotten', async () => {
		const { subscription } = await subscribe(2);
		const item = itemOf(subscription);
		await shop.stripe.subscriptions.update(subscription.id, {
			items: [{ id: item.id, quantity: 9 }],
			proration_behavior: 'none'
		});
		expect((await shop.stripe.invoices.createPreview({ subscription: subscription.id })).total).toBe(36_000);
		const extra = await shop.stripe.prices.create({
			product: String(shop.monthly.product),
			currency: 'eur',
			unit_amount: 100,
			recurring: { interval: 'month' }
		});
		const added = await shop.stripe.subscriptions.update(subscription.id, { items: [{ price: extra.id }] });
		expect(added.items.data.length).toBe(2);
		await expect(
			shop.stripe.subscriptions.update(subscription.id, { items: [{ price: shop.monthly.id }] })
		).rejects.toMatchObject({ statusCode: 400 });
		await expect(
			shop.stripe.subscriptions.update(subscription.id, { items: [{ id: 'si_none', quantity: 1 }] })
		).rejects.toMatchObject({ code: 'resource_missing' });
	});

	it('begins a new period, billed at once, with another interval', async () => {
		const { subscription } = await subscribe(2);
		const item = itemOf(subscription);
		const changed = await shop.stripe.subscriptions.update(subscription.id, {
			items: [{ id: item.id, price: shop.yearly.id }],
			expand: ['latest_invoice']
		});
		const yearly = itemOf(changed);
		expect(yearly.price.id).toBe(shop.yearly.id);
		expect(yearly.current_period_end - yearly.current_period_start).toBeGreaterThanOrEqual(365 * 86_400);
		expect(changed.latest_invoice).toMatchObject({ status: 'paid', total: 80_000 - 8000 });
	});

	it('is refused with 402, and changes nothing, where it must be paid and cannot', async () => {
		const { subscription, customer } = await subscribe(2);
		const failing = await shop.stripe.paymentMethods.attach('pm_card_chargeCustomerFail', {
			customer: customer.id
		});
		await shop.stripe.customers.update(customer.id, {
			invoice_settings: { default_payment_method: failing.id }
		});
		await expect(
			shop.stripe.subscriptions.update(subscription.id, {
				items: [{ id: itemOf(subscription).id, quantity: 50 }],
				proration_behavior: 'always_invoice',
				payment_behavior: 'error_if_incomplete'
			})
		).rejects.toMatchObject({ statusCode: 402, code: 'card_declined' });
		expect(itemOf(await shop.stripe.subscriptions.retrieve(subscription.id)).quantity).toBe(2);
	});
});

describe('an end', () => {
	it('at the end of the period can be taken back, else comes then', async () => {
		const { subscription, customer } = await subscribe();
		const ending = await shop.stripe.subscriptions.update(subscription.id, { cancel_at_period_end: true });
		expect(ending).toMatchObject({
			status: 'active',
			cancel_at_period_end: true,
			cancel_at: itemOf(subscription).current_period_end
		});
		const kept = await shop.stripe.subscriptions.update(subscription.id, { cancel_at_period_end: false });
		expect(kept).toMatchObject({ cancel_at_period_end: false, cancel_at: null, canceled_at: null });
		await shop.stripe.subscriptions.update(subscription.id, { cancel_at_period_end: true });
		const before = (await eventTypes(shop)).length;
		shop.fake.control.advance({ customer: customer.id, days: 32 });
		const ended = await shop.stripe.subscriptions.retrieve(subscription.id);
		expect(ended).toMatchObject({ status: 'canceled', ended_at: itemOf(subscription).current_period_end });
		expect(await eventTypes(shop, before)).toEqual(['customer.subscription.deleted']);
		expect((await shop.stripe.invoices.list({ subscription: subscription.id })).data.length).toBe(1);
	});

	it('at once hides it from lists and lets nobody change it', async () => {
		const { subscription, customer } = await subscribe();
		expect((await shop.stripe.subscriptions.cancel(subscription.id)).status).toBe('canceled');
		const listed = async (status?: 'all' | 'canceled') =>
			(await shop.stripe.subscriptions.list({ customer: customer.id, status })).data.length;
		expect([await listed(), await listed('all'), await listed('canceled')]).toEqual([0, 1, 1]);
		await expect(
			shop.stripe.subscriptions.update(subscription.id, { metadata: { a: 'b' } })
		).rejects.toMatchObject({ code: 'resource_missing' });
		await expect(shop.stripe.subscriptions.cancel(subscription.id)).rejects.toMatchObject({
			statusCode: 404
		});
	});
});
