import { startStripeFake } from './start';

/*
 * The stand-in as a process of its own. Environment: STRIPE_FAKE_PORT, STRIPE_FAKE_KEY, and unless events are only to
 * be recorded STRIPE_FAKE_WEBHOOK_URL and STRIPE_FAKE_WEBHOOK_SECRET; STRIPE_FAKE_FILE keeps everything from one start
 * to the next, STRIPE_FAKE_RETRY_SECONDS (like 1,5,60) says when a delivery is tried again.
 */

function needed(name: string): string {
	const value = process.env[name];
	if (value === undefined || value === '') throw new Error(`${name} is not set`);
	return value;
}

const url = process.env.STRIPE_FAKE_WEBHOOK_URL ?? '';
const retries = process.env.STRIPE_FAKE_RETRY_SECONDS ?? '';

const fake = await startStripeFake({
	port: Number(needed('STRIPE_FAKE_PORT')),
	key: needed('STRIPE_FAKE_KEY'),
	...(process.env.STRIPE_FAKE_FILE ? { file: process.env.STRIPE_FAKE_FILE } : {}),
	...(url === ''
		? {}
		: {
				webhook: {
					url,
					secret: needed('STRIPE_FAKE_WEBHOOK_SECRET'),
					...(retries === '' ? {} : { retrySeconds: retries.split(',').map(Number) })
				}
			})
});

for (const signal of ['SIGTERM', 'SIGINT'] as const) {
	process.on(signal, () => {
		void fake.stop().then(() => process.exit(0));
	});
}
