import { afterAll, beforeAll, expect, it } from 'vitest';
import { customerWithCard, eventTypes, idOf, openShop, type Shop } from '../testing/shop';

let shop: Shop;
beforeAll(async () => {
	shop = await openShop();
});
afterAll(() => shop.stop());

it('takes money back in parts, up to the whole, and ends nothing', async () => {
	const customer = await customerWithCard(shop);
	const subscription = await shop.stripe.subscriptions.create({
		customer: customer.id,
		items: [{ price: shop.monthly.id, quantity: 2 }]
	});
	const invoice = idOf(subscription.latest_invoice);
	const [payment] = (await shop.stripe.invoicePayments.list({ invoice })).data;
	const intent = idOf(payment?.payment.payment_intent);
	const byIntent = await shop.stripe.invoicePayments.list({
		payment: { type: 'payment_intent', payment_intent: intent }
	});
	expect(byIntent.data.map((each) => each.invoice)).toEqual([invoice]);
	const before = (await eventTypes(shop)).length;

	const part = await shop.stripe.refunds.create({
		payment_intent: intent,
		amount: 3000,
		reason: 'requested_by_customer',
		metadata: { why: 'x' }
	});
	expect(part).toMatchObject({ object: 'refund', amount: 3000, status: 'succeeded', payment_intent: intent });
	const charge = await shop.stripe.charges.retrieve(idOf(part.charge), { expand: ['refunds'] });
	expect(charge).toMatchObject({
		amount_refunded: 3000,
		refunded: false,
		refunds: { data: [{ id: part.id }] }
	});
	await expect(shop.stripe.refunds.create({ charge: charge.id, amount: 5001 })).rejects.toMatchObject({
		param: 'amount'
	});
	expect((await shop.stripe.refunds.create({ charge: charge.id })).amount).toBe(5000);
	expect(await shop.stripe.charges.retrieve(charge.id)).toMatchObject({
		amount_refunded: 8000,
		refunded: true
	});
	await expect(shop.stripe.refunds.create({ charge: charge.id })).rejects.toMatchObject({
		code: 'charge_already_refunded'
	});
	expect(await eventTypes(shop, before)).toEqual([
		'refund.created',
		'charge.refunded',
		'refund.created',
		'charge.refunded'
	]);
	expect((await shop.stripe.refunds.list({ charge: charge.id })).data.length).toBe(2);
	expect((await shop.stripe.subscriptions.retrieve(subscription.id)).status).toBe('active');
	expect((await shop.stripe.invoices.retrieve(invoice)).status).toBe('paid');
});
