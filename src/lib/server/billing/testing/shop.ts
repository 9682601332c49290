import { createServer } from 'node:http';
import { once } from 'node:events';
import type { AddressInfo } from 'node:net';
import { asc, eq, isNull } from 'drizzle-orm';
import type { StripeFake } from '../../../../../stripe-fake/start';
import { startStripeFake } from '../../../../../stripe-fake/start';
import type { Database } from '../../db';
import { billingEvents } from '../../db/schema';
import { setTestEnvironment } from '../../testing/environment';
import { ensureCatalogue } from '../catalogue';
import { RefusedEventError } from '../errors';
import { followEvent } from '../handle-event';
import { plans } from '../plans';
import { stripe } from '../stripe';
import { receiveEvent } from '../webhook';

export const webhookSecret = 'whsec_tests';

export interface Shop {
	fake: StripeFake;
	/** Follows every event that has arrived, in the order of arrival, as the queue would. */
	follow: () => Promise<void>;
	/** Waits for the deliveries, then follows them. */
	settle: () => Promise<void>;
	stop: () => Promise<void>;
}

/** The stand-in for payments with our catalogue in it, delivering its events to the real receiver over HTTP. */
export async function openShop(db: Database): Promise<Shop> {
	const server = createServer((request, response) => {
		let body = '';
		request.setEncoding('utf8');
		request.on('data', (part: string) => (body += part));
		request.on('end', () => {
			const signature = request.headers['stripe-signature'];
			receiveEvent(body, typeof signature === 'string' ? signature : null, db).then(
				() => response.writeHead(200).end(),
				(error: unknown) => response.writeHead(error instanceof RefusedEventError ? 400 : 500).end()
			);
		});
	});
	server.listen(0, '127.0.0.1');
	await once(server, 'listening');
	const { port } = server.address() as AddressInfo;
	const fake = await startStripeFake({
		key: 'sk_test_tests',
		webhook: { url: `http://127.0.0.1:${port}/webhooks/stripe`, secret: webhookSecret }
	});
	setTestEnvironment({
		STRIPE_API_URL: fake.address,
		STRIPE_PAGES: fake.address,
		STRIPE_WEBHOOK_SECRET: `whsec_newer,${webhookSecret}`
	});
	await ensureCatalogue(stripe(), plans());
	const follow = async () => {
		const open = await db
			.select()
			.from(billingEvents)
			.where(isNull(billingEvents.handledAt))
			.orderBy(asc(billingEvents.receivedAt));
		for (const event of open) {
			const problem = await followEvent(db, event);
			await db
				.update(billingEvents)
				.set({ handledAt: new Date(), problem })
				.where(eq(billingEvents.id, event.id));
		}
	};
	return {
		fake,
		follow,
		settle: async () => {
			await fake.control.settle();
			await follow();
		},
		stop: async () => {
			await fake.stop();
			const closed = new Promise<void>((resolve) => server.close(() => resolve()));
			server.closeAllConnections();
			await closed;
		}
	};
}

/** Pays at the stand-in's own page, as a buyer does. @returns where the browser is sent, or null if it stays */
export async function pay(address: string, card = '4242 4242 4242 4242'): Promise<string | null> {
	const fields = {
		card,
		expiry: '12/40',
		cvc: '123',
		name: 'Ines Tarrow',
		email: 'ines@tallisbrook.example'
	};
	const body = new URLSearchParams(fields);
	const response = await fetch(address, { method: 'POST', redirect: 'manual', body });
	return response.headers.get('location');
}
