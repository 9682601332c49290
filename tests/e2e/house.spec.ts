import { expect, test } from '@playwright/test';

test('the process says that it is alive', async ({ request }) => {
	const response = await request.get('/healthz');
	expect(response.status()).toBe(200);
	expect(await response.json()).toEqual({ alive: true });
});

test('the service is ready in all its parts, and says nothing more', async ({ request }) => {
	const response = await request.get('/readyz');
	expect(response.status()).toBe(200);
	expect(await response.json()).toEqual({
		ready: true,
		parts: { database: 'ok', migrations: 'ok', queue: 'ok' }
	});
});
