import type Stripe from 'stripe';
import { intervals, packLookupKey, seatLookupKey, type Interval, type Plans } from './plans';

/* Products and prices of the plans at the payment service. Prices are found by their lookup key, never by an id of ours. */

interface WantedPrice {
	lookupKey: string;
	product: { id: string; name: string };
	amount: number;
	interval: Interval | null;
	metadata: Stripe.MetadataParam;
}

function wantedPrices(plans: Plans): WantedPrice[] {
	const seats = plans.plans.flatMap((plan) =>
		intervals.map((interval) => ({
			lookupKey: seatLookupKey(plan, interval),
			product: { id: `noonmark-${plan.id}`, name: `Noonmark ${plan.name}, a seat` },
			amount: plan.seatPrice[interval],
			interval,
			metadata: { plan: plan.id }
		}))
	);
	const { exports, price } = plans.pack;
	const pack = {
		lookupKey: packLookupKey,
		product: { id: 'noonmark-pack', name: `Noonmark, ${exports} exports` },
		amount: price,
		interval: null,
		metadata: { pack: String(exports) }
	};
	return [...seats, pack];
}

/** The payment service looks up no more than this. */
const keysAtOnce = 10;

async function pricesByKey(stripe: Stripe, keys: string[]): Promise<Map<string, Stripe.Price>> {
	const found = new Map<string, Stripe.Price>();
	for (let i = 0; i < keys.length; i += keysAtOnce) {
		const lookup_keys = keys.slice(i, i + keysAtOnce);
		const { data } = await stripe.prices.list({ lookup_keys, active: true, limit: 100 });
		for (const price of data) if (price.lookup_key !== null) found.set(price.lookup_key, price);
	}
	return found;
}

const isAsWanted = (price: Stripe.Price, wanted: WantedPrice, currency: string) =>
	price.unit_amount === wanted.amount &&
	price.currency === currency &&
	(price.recurring?.interval ?? null) === wanted.interval;

/**
 * Makes the products and prices that are missing. A price cannot change its amount: another amount is another price,
 * which takes over the lookup key; who subscribed at the old one keeps it. Running it again changes nothing.
 * @returns lookup keys of the prices that were made
 */
export async function ensureCatalogue(stripe: Stripe, plans: Plans): Promise<string[]> {
	const wanted = wantedPrices(plans);
	const present = await pricesByKey(
		stripe,
		wanted.map(({ lookupKey }) => lookupKey)
	);
	const products = new Set<string>();
	for await (const product of stripe.products.list({ limit: 100 })) products.add(product.id);
	const made: string[] = [];
	for (const want of wanted) {
		const before = present.get(want.lookupKey);
		if (before !== undefined && isAsWanted(before, want, plans.currency)) continue;
		if (!products.has(want.product.id)) {
			await stripe.products.create(want.product, { idempotencyKey: `product:${want.product.id}` });
			products.add(want.product.id);
		}
		const params: Stripe.PriceCreateParams = {
			product: want.product.id,
			currency: plans.currency,
			unit_amount: want.amount,
			lookup_key: want.lookupKey,
			transfer_lookup_key: true,
			metadata: want.metadata
		};
		if (want.interval !== null) params.recurring = { interval: want.interval };
		const replaced = before?.id ?? 'none';
		await stripe.prices.create(params, {
			idempotencyKey: `price:${want.lookupKey}:${want.amount}${plans.currency}:${replaced}`
		});
		made.push(want.lookupKey);
	}
	return made;
}

/**
 * The price to charge, from the plans and never from a browser.
 * @throws Error where the payment service has none, or another amount than the plans say
 */
export async function priceOf(stripe: Stripe, lookupKey: string, plans: Plans): Promise<Stripe.Price> {
	const want = wantedPrices(plans).find((one) => one.lookupKey === lookupKey);
	const price = (await pricesByKey(stripe, [lookupKey])).get(lookupKey);
	if (want === undefined || price === undefined || !isAsWanted(price, want, plans.currency)) {
		throw new Error(
			`The payment service has no price “${lookupKey}” as the plans have it: run the catalogue program.`
		);
	}
	return price;
}

/** The plan that a price is for; null for a price that is none of ours. */
export function planOfPrice(
	price: Stripe.Price,
	plans: Plans
): { planId: string; interval: Interval } | null {
	const interval = intervals.find((one) => one === price.recurring?.interval);
	const plan = plans.plans.find(({ id }) => id === price.metadata.plan);
	const once = price.recurring?.interval_count ?? 1;
	return plan === undefined || interval === undefined || once !== 1 ? null : { planId: plan.id, interval };
}

/** Whether a price is that of a pack. */
export const isPackPrice = (price: Stripe.Price): boolean =>
	price.recurring === null && price.metadata.pack !== undefined;
