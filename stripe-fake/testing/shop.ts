import { createServer, type Server } from 'node:http';
import { once } from 'node:events';
import type { AddressInfo } from 'node:net';
import Stripe from 'stripe';
import { vi } from 'vitest';
import { startStripeFake, type StartOptions, type StripeFake } from '../start';

// Every step is a request over HTTP, and the machine may be busy.
vi.setConfig({ testTimeout: 30_000, hookTimeout: 30_000 });

export const key = 'sk_test_standin';
export const webhookSecret = 'whsec_standin';

export const good = '4242 4242 4242 4242';

/** @param more for the SDK; it does not retry unless told */
export const clientOf = (fake: StripeFake, more: Stripe.StripeConfig = {}, secret = key): Stripe =>
	new Stripe(secret, {
		host: '127.0.0.1',
		port: fake.port,
		protocol: 'http',
		telemetry: false,
		maxNetworkRetries: 0,
		...more
	});

export type Shop = {
	fake: StripeFake;
	stripe: Stripe;
	monthly: Stripe.Price;
	yearly: Stripe.Price;
	pack: Stripe.Price;
	stop: () => Promise<void>;
};

/** A stand-in with a subscription of 40.00 EUR a month or 400.00 a year, and a pack for 90.00. */
export async function openShop(options: Partial<StartOptions> = {}): Promise<Shop> {
	const fake = await startStripeFake({ key, ...options });
	const stripe = clientOf(fake);
	const product = await stripe.products.create({ name: 'Practice' });
	const priced = (interval: 'month' | 'year', amount: number) =>
		stripe.prices.create({
			product: product.id,
			currency: 'eur',
			unit_amount: amount,
			recurring: { interval },
			lookup_key: `practice_${interval}`
		});
	return {
		fake,
		stripe,
		monthly: await priced('month', 4000),
		yearly: await priced('year', 40_000),
		pack: await stripe.prices.create({ product: product.id, currency: 'eur', unit_amount: 9000 }),
		stop: () => fake.stop()
	};
}

/** A customer whose card is kept and pays. @param card token of a test card */
export async function customerWithCard({ stripe }: Shop, card = 'pm_card_visa'): Promise<Stripe.Customer> {
	const customer = await stripe.customers.create({ name: 'Ada Reed', email: 'ada@reed.example' });
	const { id } = await stripe.paymentMethods.attach(card, { customer: customer.id });
	return await stripe.customers.update(customer.id, { invoice_settings: { default_payment_method: id } });
}

export async function checkoutFor(
	{ stripe, monthly, pack }: Shop,
	given: Partial<Stripe.Checkout.SessionCreateParams> = {}
): Promise<Stripe.Checkout.Session> {
	return await stripe.checkout.sessions.create({
		mode: 'subscription',
		line_items: [{ price: given.mode === 'payment' ? pack.id : monthly.id, quantity: 3 }],
		success_url: 'https://shop.example/done?session={CHECKOUT_SESSION_ID}',
		cancel_url: 'https://shop.example/plans',
		...given
	});
}

export type Shown = { status: number; location: string | null; text: string };

async function shown(response: Response): Promise<Shown> {
	return {
		status: response.status,
		location: response.headers.get('location'),
		text: await response.text()
	};
}

export const openPage = async (address: string): Promise<Shown> =>
	await shown(await fetch(address, { redirect: 'manual' }));

/** Posts a form of a page. */
export const post = async (address: string, fields: Record<string, string>): Promise<Shown> =>
	await shown(
		await fetch(address, { method: 'POST', redirect: 'manual', body: new URLSearchParams(fields) })
	);

export const payWith = async (address: string | null, card: string): Promise<Shown> =>
	await post(address ?? '', {
		card,
		expiry: '12/40',
		cvc: '123',
		name: 'Ada Reed',
		email: 'ada@reed.example'
	});

/** The id behind a field that may hold the object itself. */
export const idOf = (field: string | { id: string } | null | undefined): string =>
	typeof field === 'string' ? field : (field?.id ?? '');

export const itemOf = (subscription: Stripe.Subscription): Stripe.SubscriptionItem => {
	const [item] = subscription.items.data;
	if (item === undefined) throw new Error(`${subscription.id} has no item.`);
	return item;
};

export type Received = { body: string; signature: string };

export type Receiver = {
	url: string;
	received: Received[];
	/** Status of the next answers; 200 once used up. */
	answers: number[];
	types: () => string[];
	stop: () => Promise<void>;
};

/** A webhook that notes what it is sent. */
export async function startReceiver(): Promise<Receiver> {
	const received: Received[] = [];
	const answers: number[] = [];
	const server: Server = createServer((request, response) => {
		let body = '';
		request.setEncoding('utf8');
		request.on('data', (part: string) => (body += part));
		request.on('end', () => {
			received.push({ body, signature: String(request.headers['stripe-signature']) });
			response.writeHead(answers.shift() ?? 200).end();
		});
	});
	server.listen(0, '127.0.0.1');
	await once(server, 'listening');
	const { port } = server.address() as AddressInfo;
	return {
		url: `http://127.0.0.1:${port}/webhooks/stripe`,
		received,
		answers,
		types: () => received.map(({ body }) => (JSON.parse(body) as { type: string }).type),
		stop: async () => {
			const closed = new Promise<void>((resolve) => server.close(() => resolve()));
			server.closeAllConnections();
			await closed;
		}
	};
}

/** Types of all events so far, oldest first. */
export async function eventTypes({ stripe }: Shop, since = 0): Promise<string[]> {
	const events = await stripe.events.list({ limit: 100 }).autoPagingToArray({ limit: 1000 });
	return events
		.map(({ type }) => type)
		.reverse()
		.slice(since);
}
