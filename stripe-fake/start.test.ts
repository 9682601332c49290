import { mkdtemp, readdir, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { startStripeFake } from './start';
import {
	clientOf,
	customerWithCard,
	idOf,
	key,
	openPage,
	openShop,
	startReceiver,
	webhookSecret
} from './testing/shop';

let folder: string;
beforeAll(async () => {
	folder = await mkdtemp(join(tmpdir(), 'stripe-fake-'));
});
afterAll(() => rm(folder, { recursive: true }));

describe('the state file', () => {
	it('lets a second start find everything, at its own address', async () => {
		const file = join(folder, 'kept.json');
		const shop = await openShop({ file });
		const customer = await customerWithCard(shop);
		const made = await shop.stripe.subscriptions.create(
			{ customer: customer.id, items: [{ price: shop.monthly.id }] },
			{ idempotencyKey: 'kept' }
		);
		await shop.stop();
		expect(await readdir(folder)).toEqual(['kept.json']);

		const fake = await startStripeFake({ key, file });
		const stripe = clientOf(fake);
		const again = await stripe.subscriptions.create(
			{ customer: customer.id, items: [{ price: shop.monthly.id }] },
			{ idempotencyKey: 'kept' }
		);
		expect(again.id).toBe(made.id);
		const invoice = await stripe.invoices.retrieve(idOf(made.latest_invoice));
		expect(invoice.hosted_invoice_url).toContain(fake.address);
		expect((await openPage(invoice.hosted_invoice_url ?? '')).status).toBe(200);
		await fake.stop();
	});

	it('keeps events on their way to a receiver that was down', async () => {
		const file = join(folder, 'pending.json');
		const receiver = await startReceiver();
		await receiver.stop();
		const first = await startStripeFake({
			key,
			file,
			webhook: { url: receiver.url, secret: webhookSecret, retrySeconds: [60] }
		});
		await clientOf(first).customers.create({});
		await first.control.settle();
		expect(first.control.deliveries()).toMatchObject([{ state: 'waiting', attempts: [{ status: null }] }]);
		await first.stop();
		const up = await startReceiver();
		const second = await startStripeFake({ key, file, webhook: { url: up.url, secret: webhookSecret } });
		expect(second.control.deliveries()).toMatchObject([{ type: 'customer.created', state: 'waiting' }]);
		expect(await second.control.redeliver(second.control.deliveries()[0]?.event ?? '')).toBe(200);
		await second.stop();
		await up.stop();
	});
});

describe('the controls over HTTP', () => {
	it('turn what the functions turn', async () => {
		const shop = await openShop();
		const ask = async (method: string, path: string, body?: unknown) => {
			const response = await fetch(`${shop.fake.address}/_control/${path}`, {
				method,
				...(body === undefined ? {} : { body: JSON.stringify(body) })
			});
			return { status: response.status, body: (await response.json()) as unknown };
		};
		expect(await ask('GET', 'ready')).toEqual({ status: 200, body: { ready: true } });
		const customer = await customerWithCard(shop);
		await shop.stripe.subscriptions.create({ customer: customer.id, items: [{ price: shop.monthly.id }] });
		expect(await ask('POST', 'advance', { customer: customer.id, days: 40 })).toMatchObject({
			status: 200,
			body: { done: 2 }
		});
		expect(await ask('POST', 'settings', { end: 'unpaid' })).toMatchObject({
			body: { dunning: { end: 'unpaid', retryDays: [3, 5, 7] } }
		});
		expect(await ask('POST', 'webhooks', { mode: 'hold' })).toMatchObject({
			body: { mode: 'hold', duplicates: 0 }
		});
		expect(await ask('POST', 'webhooks', { mode: 'sometimes' })).toMatchObject({ status: 400 });
		expect(await ask('POST', 'fail', { status: 503, times: 2 })).toMatchObject({ status: 200 });
		for (let time = 0; time < 2; time += 1)
			await expect(shop.stripe.customers.list()).rejects.toMatchObject({ statusCode: 503 });
		const { body } = await ask('GET', 'requests');
		expect(body).toEqual(
			expect.arrayContaining([expect.objectContaining({ path: '/v1/customers', status: 503 })])
		);
		expect(await ask('POST', 'reset')).toMatchObject({ status: 200 });
		expect((await shop.stripe.customers.list()).data).toEqual([]);
		expect(await ask('POST', 'nothing')).toMatchObject({ status: 404 });
		await shop.stop();
	});

	it('let no page of a browser in', async () => {
		const shop = await openShop();
		const response = await fetch(`${shop.fake.address}/_control/reset`, {
			method: 'POST',
			headers: { origin: 'https://elsewhere.example' }
		});
		expect(response.status).toBe(403);
		expect((await shop.stripe.products.list()).data.length).toBe(1);
		await shop.stop();
	});
});
