import { afterAll, beforeAll, expect, it } from 'vitest';
import { openShop, type Shop } from '../testing/shop';

let shop: Shop;
beforeAll(async () => {
	shop = await openShop();
});
afterAll(() => shop.stop());

it('keeps a product and changes its text and metadata, an empty text clearing', async () => {
	const made = await shop.stripe.products.create({
		name: 'Individual',
		description: 'One seat',
		metadata: { plan: 'individual', note: 'x' }
	});
	expect(made.id).toMatch(/^prod_\w{14}$/);
	const changed = await shop.stripe.products.update(made.id, {
		description: '',
		metadata: { note: '', more: 'y' }
	});
	expect(changed.description).toBeNull();
	expect(changed.metadata).toEqual({ plan: 'individual', more: 'y' });
	expect(await shop.stripe.products.retrieve(made.id)).toMatchObject({ name: 'Individual' });
	expect((await shop.stripe.products.list({ ids: [made.id] })).data.length).toBe(1);
});

it('prices by the month, the year and once, with decimals as the SDK wants them', () => {
	expect(shop.monthly.recurring).toMatchObject({ interval: 'month', interval_count: 1 });
	expect(shop.yearly.recurring?.interval).toBe('year');
	expect(shop.pack).toMatchObject({ type: 'one_time', recurring: null, unit_amount: 9000 });
	expect(shop.monthly.unit_amount_decimal?.toString()).toBe('4000');
});

it('never changes the amount of a price', async () => {
	const amount = { active: true, unit_amount: 5000 };
	await expect(shop.stripe.prices.update(shop.pack.id, amount)).rejects.toMatchObject({
		code: 'parameter_unknown'
	});
});

it('finds prices by lookup key, which moves to another price only on request', async () => {
	const given = {
		product: String(shop.monthly.product),
		currency: 'eur',
		unit_amount: 4500,
		recurring: { interval: 'month' as const },
		lookup_key: 'practice_month'
	};
	await expect(shop.stripe.prices.create(given)).rejects.toMatchObject({ param: 'lookup_key' });
	const newer = await shop.stripe.prices.create({ ...given, transfer_lookup_key: true });
	const found = await shop.stripe.prices.list({ lookup_keys: ['practice_month', 'practice_year'] });
	expect(found.data.map(({ id }) => id)).toEqual([newer.id, shop.yearly.id]);
	expect((await shop.stripe.prices.retrieve(shop.monthly.id)).lookup_key).toBeNull();
	await shop.stripe.prices.update(newer.id, { active: false });
	expect((await shop.stripe.prices.list({ active: true, lookup_keys: ['practice_month'] })).data).toEqual([]);
});
