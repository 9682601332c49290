import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { freePort } from '../scripts/lib/ports.mjs';
import { startProgram } from '../scripts/lib/processes.mjs';
import { makeSecrets } from '../scripts/lib/secrets.mjs';
import { serviceEnvironment } from '../scripts/lib/service.mjs';
import Stripe from 'stripe';

let folder: string;
beforeAll(async () => {
	folder = await mkdtemp(join(tmpdir(), 'stripe-fake-'));
});
afterAll(() => rm(folder, { recursive: true }));

const root = new URL('..', import.meta.url).pathname;

/** Starts the process as the scripts do, and waits until it answers. */
async function start(port: number) {
	const part = startProgram('stripe', ['--import', 'tsx', join(root, 'stripe-fake', 'main.ts')], {
		env: {
			PATH: process.env.PATH,
			STRIPE_FAKE_PORT: String(port),
			STRIPE_FAKE_FILE: join(folder, 'stripe.json'),
			STRIPE_FAKE_KEY: 'sk_test_process',
			STRIPE_FAKE_WEBHOOK_URL: 'http://127.0.0.1:9/webhooks/stripe',
			STRIPE_FAKE_WEBHOOK_SECRET: 'whsec_process',
			STRIPE_FAKE_RETRY_SECONDS: '60'
		},
		logs: folder
	});
	let crash: string | undefined;
	void part.crashed.then((reason) => (crash = reason));
	for (;;) {
		if (crash !== undefined) throw new Error(crash);
		const up = await fetch(`http://127.0.0.1:${port}/_control/ready`).then(
			({ ok }) => ok,
			() => false
		);
		if (up) return part;
		await new Promise((resolve) => setTimeout(resolve, 50));
	}
}

it('runs as a process of its own, and finds at a second start what it had', { timeout: 60_000 }, async () => {
	const port = await freePort();
	const stripe = new Stripe('sk_test_process', {
		host: '127.0.0.1',
		port,
		protocol: 'http',
		telemetry: false
	});
	const first = await start(port);
	const { id } = await stripe.customers.create({ name: 'Kept' });
	await first.stop();
	const second = await start(port);
	expect(await stripe.customers.retrieve(id)).toMatchObject({ name: 'Kept' });
	await second.stop();
});

describe('the environment of the service', () => {
	const secrets = makeSecrets();
	const ports = { web: 1, smtp: 2, mail: 3, stripe: 4 };
	const environment = (inherited: NodeJS.ProcessEnv) =>
		serviceEnvironment({
			databaseUrl: 'postgres://127.0.0.1/none',
			secrets,
			ports,
			folder,
			inherited,
			say: () => undefined,
			onStop: () => undefined
		});

	it('names the stand-in', () => {
		expect(environment({ STRIPE_API_URL: 'http://elsewhere.example', STRIPE_SECRET_KEY: '' })).toMatchObject({
			STRIPE_SECRET_KEY: secrets.STRIPE_SECRET_KEY,
			STRIPE_WEBHOOK_SECRET: secrets.STRIPE_WEBHOOK_SECRET,
			STRIPE_API_URL: 'http://127.0.0.1:4',
			STRIPE_PAGES: 'http://127.0.0.1:4'
		});
	});

	it("leaves a caller's own account alone", () => {
		const own = environment({ STRIPE_SECRET_KEY: 'sk_test_own', STRIPE_WEBHOOK_SECRET: 'whsec_own' });
		expect(own).toMatchObject({ STRIPE_SECRET_KEY: 'sk_test_own', STRIPE_WEBHOOK_SECRET: 'whsec_own' });
		expect(own).not.toHaveProperty('STRIPE_API_URL');
		expect(own).not.toHaveProperty('STRIPE_PAGES');
	});
});
