import { afterAll, beforeAll, expect, it } from 'vitest';
import { customerWithCard, openShop, type Shop } from '../testing/shop';

let shop: Shop;
beforeAll(async () => {
	shop = await openShop();
});
afterAll(() => shop.stop());

it('keeps, changes and clears', async () => {
	const made = await shop.stripe.customers.create({
		name: 'Tallis',
		email: 'pay@tallis.example',
		address: { city: 'Marrow', country: 'GB' },
		metadata: { organisation: '7' }
	});
	expect(made).toMatchObject({
		object: 'customer',
		livemode: false,
		balance: 0,
		metadata: { organisation: '7' }
	});
	const changed = await shop.stripe.customers.update(made.id, { address: '', phone: '123', metadata: '' });
	expect(changed).toMatchObject({ address: null, phone: '123', metadata: {}, name: 'Tallis' });
});

it('keeps cards, and lets only an own one pay', async () => {
	const customer = await customerWithCard(shop);
	const other = await shop.stripe.customers.create({});
	const card = String(customer.invoice_settings.default_payment_method);
	expect(await shop.stripe.paymentMethods.retrieve(card)).toMatchObject({
		customer: customer.id,
		card: { brand: 'visa', last4: '4242' }
	});
	await expect(
		shop.stripe.customers.update(other.id, { invoice_settings: { default_payment_method: card } })
	).rejects.toMatchObject({ code: 'resource_missing' });
	await expect(shop.stripe.paymentMethods.attach(card, { customer: other.id })).rejects.toMatchObject({
		statusCode: 400
	});
	expect((await shop.stripe.customers.listPaymentMethods(customer.id)).data.map(({ id }) => id)).toEqual([
		card
	]);
	await shop.stripe.paymentMethods.detach(card);
	const after = await shop.stripe.customers.retrieve(customer.id);
	expect(after).toMatchObject({ invoice_settings: { default_payment_method: null } });
});

it('takes the number of a test card and of no other', async () => {
	const card = (number: string) => ({ number, exp_month: 12, exp_year: 2040, cvc: '123' });
	const made = await shop.stripe.paymentMethods.create({ type: 'card', card: card('5555555555554444') });
	expect(made.card).toMatchObject({ brand: 'mastercard', exp_year: 2040 });
	await expect(
		shop.stripe.paymentMethods.create({ type: 'card', card: card('4111111111111111') })
	).rejects.toMatchObject({ statusCode: 402 });
});

it('leaves a stub of a deleted one and ends what they subscribed to', async () => {
	const customer = await customerWithCard(shop);
	const { id } = await shop.stripe.subscriptions.create({
		customer: customer.id,
		items: [{ price: shop.monthly.id }]
	});
	expect(await shop.stripe.customers.del(customer.id)).toEqual(
		expect.objectContaining({ id: customer.id, object: 'customer', deleted: true })
	);
	expect(await shop.stripe.customers.retrieve(customer.id)).toMatchObject({ deleted: true });
	expect((await shop.stripe.subscriptions.retrieve(id)).status).toBe('canceled');
	await expect(shop.stripe.customers.update(customer.id, { name: 'x' })).rejects.toMatchObject({
		code: 'resource_missing'
	});
});

it('leaves no customer where the card is declined', async () => {
	const email = 'declined@reed.example';
	await expect(
		shop.stripe.customers.create({ email, payment_method: 'pm_card_chargeDeclined' })
	).rejects.toMatchObject({ code: 'card_declined' });
	expect((await shop.stripe.customers.list({ email })).data).toEqual([]);
});
