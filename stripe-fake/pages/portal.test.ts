import { afterAll, beforeAll, expect, it } from 'vitest';
import {
	customerWithCard,
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

async function opened() {
	const customer = await customerWithCard(shop);
	const subscription = await shop.stripe.subscriptions.create({
		customer: customer.id,
		items: [{ price: shop.monthly.id, quantity: 3 }]
	});
	const session = await shop.stripe.billingPortal.sessions.create({
		customer: customer.id,
		return_url: 'https://shop.example/billing'
	});
	return {
		customer,
		subscription,
		session,
		again: () => shop.stripe.subscriptions.retrieve(subscription.id)
	};
}

it('shows plan, card, invoices and the way back, to whoever has its address', async () => {
	const { session, subscription } = await opened();
	const { status, text } = await openPage(session.url);
	expect(status).toBe(200);
	for (const words of ['Practice', '3 × EUR 40.00 a month', 'ends in 4242', 'https://shop.example/billing'])
		expect(text).toContain(words);
	const invoice = await shop.stripe.invoices.retrieve(idOf(subscription.latest_invoice));
	expect(text).toContain(String(invoice.hosted_invoice_url));
	expect(await openPage(`${session.url}x`)).toMatchObject({ status: 404 });
});

it('changes the number of seats', async () => {
	const { session, subscription, again } = await opened();
	expect(
		await post(`${session.url}/quantity`, { subscription: subscription.id, quantity: '7' })
	).toMatchObject({ status: 303 });
	expect(itemOf(await again()).quantity).toBe(7);
	const refused = await post(`${session.url}/quantity`, { subscription: subscription.id, quantity: '0' });
	expect(refused.text).toContain('whole number of seats');
	expect(itemOf(await again()).quantity).toBe(7);
});

it('ends a subscription at the end of the period and takes that back', async () => {
	const { session, subscription, again } = await opened();
	await post(`${session.url}/cancel`, { subscription: subscription.id });
	expect(await again()).toMatchObject({ status: 'active', cancel_at_period_end: true });
	expect((await openPage(session.url)).text).toContain('Keep the subscription');
	await post(`${session.url}/keep`, { subscription: subscription.id });
	expect((await again()).cancel_at_period_end).toBe(false);
});

it("touches no other customer's subscription", async () => {
	const one = await opened();
	const other = await opened();
	await post(`${one.session.url}/cancel`, { subscription: other.subscription.id });
	expect((await other.again()).cancel_at_period_end).toBe(false);
});

it('changes the card, unless it is declined', async () => {
	const { session, again } = await opened();
	const refused = await payWith(`${session.url}/card`, '4000 0000 0000 0002');
	expect(refused.text).toContain('The card was not kept.');
	expect((await again()).default_payment_method).toBeNull();
	expect(await payWith(`${session.url}/card`, '5555 5555 5555 4444')).toMatchObject({ status: 303 });
	const card = idOf((await again()).default_payment_method);
	expect(await shop.stripe.paymentMethods.retrieve(card)).toMatchObject({ card: { last4: '4444' } });
});

it('opens an invoice as a page and as a PDF', async () => {
	const { subscription } = await opened();
	const invoice = await shop.stripe.invoices.retrieve(idOf(subscription.latest_invoice));
	const shown = await openPage(invoice.hosted_invoice_url ?? '');
	expect(shown.text).toContain(`Invoice ${invoice.number ?? ''}`);
	expect(shown.text).toContain('EUR 120.00');
	const response = await fetch(invoice.invoice_pdf ?? '');
	expect(response.headers.get('content-type')).toBe('application/pdf');
	const file = await response.text();
	expect(file.startsWith('%PDF-1.4')).toBe(true);
	expect(file).toContain('EUR 120.00');
});
