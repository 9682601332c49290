import { expect, test, type Page } from '@playwright/test';
import { payBy, stand } from './paying';
import { newcomer, settleIn } from './people';
import { settled } from './support';

/* Paying at the stand-in's own pages, as a person does at the payment service's: card, change of mind, change of seats. */

async function open(page: Page): Promise<void> {
	await page.goto('/billing');
	await settled(page);
}

test('an owner subscribes: a declined card, then a good one; then a pack, seats, cancelled and taken back', async ({
	page
}) => {
	const person = newcomer();
	await settleIn(page, person, `Payers ${person.email}`);
	await open(page);
	const main = page.getByRole('main');
	await expect(main).toContainText('There is no plan.');
	await expect(main).toContainText('2 are left.');

	await test.step('what it comes to is shown first', async () => {
		await page.locator('#plan #seats').fill('0');
		await page.locator('#plan').getByRole('button', { name: 'See what it comes to' }).click();
		await expect(page.getByRole('alert')).toContainText('whole number');
		await page.locator('#seats').fill('3');
		await page.getByRole('button', { name: 'See what it comes to' }).click();
		await expect(page.getByRole('heading', { level: 1 })).toHaveText('Take the plan Practice?');
		await expect(main).toContainText('€72.00, and the same every month');
	});

	await test.step('a declined card buys nothing', async () => {
		await page.getByRole('button', { name: 'Go on to payment' }).click();
		await expect(page).toHaveURL((url) => url.origin === stand());
		await payBy(page, '4000 0000 0000 0002');
		await expect(page.locator('body')).toContainText(/declined/i);
		const elsewhere = await page.context().newPage();
		await elsewhere.goto('/billing');
		await expect(elsewhere.getByRole('main')).toContainText('There is no plan.');
		await elsewhere.close();
	});

	await test.step('a good one does, and leads back', async () => {
		await payBy(page, '4242 4242 4242 4242');
		await expect(page).toHaveURL(/\/billing\?done=plan$/);
		await expect(page.getByRole('status')).toContainText('The plan is paid for');
		await expect(main).toContainText('Practice with 3 seats, €72.00 a month');
		await expect(main).toContainText('26 are left.');
		await expect(main).toContainText('1 member for 3 seats.');
		const invoice = page.locator('#invoices').getByRole('row').nth(1);
		await expect(invoice).toContainText('€72.00');
		await expect(invoice).toContainText('paid');
	});

	await test.step('a pack', async () => {
		await settled(page);
		await page.locator('#packs').fill('2');
		await page.getByRole('button', { name: 'See what they come to' }).click();
		await expect(page.getByRole('heading', { level: 1 })).toHaveText('Buy 20 exports?');
		await page.getByRole('button', { name: 'Go on to payment' }).click();
		await expect(page).toHaveURL((url) => url.origin === stand());
		await payBy(page, '4242 4242 4242 4242');
		await expect(page).toHaveURL(/\/billing\?done=pack$/);
		await expect(main).toContainText('46 are left.');
		const sources = page.locator('#exports').getByRole('row');
		await expect(sources.nth(1)).toContainText(/This month, from the plan\s*24\s*24/);
		await expect(sources.nth(2)).toContainText(/To try\s*2\s*2/);
		await expect(sources.nth(3)).toContainText(/Pack\s*20\s*20/);
	});

	await test.step('seats, with what they cost shown before', async () => {
		await settled(page);
		await page.locator('#seats-section #seats').fill('5');
		await page.locator('#seats-section').getByRole('button', { name: 'See what it comes to' }).click();
		await expect(page.getByRole('heading', { level: 1 })).toHaveText('Change to 5 seats?');
		await expect(main).toContainText('€120.00 a month');
		await expect(main).toContainText(/about €4[78]\.\d\d for the rest of it/);
		await settled(page);
		await page.getByRole('button', { name: 'Change the seats' }).click();
		await expect(page).toHaveURL(/\/billing\?done=seats$/);
		await expect(main).toContainText('1 member for 5 seats.');
		await expect(main).toContainText('62 are left.');
	});

	await test.step('cancelled in the portal, and taken back there', async () => {
		const portal = async (name: RegExp) => {
			await page.getByRole('button', { name: 'Open the customer portal' }).click();
			await expect(page).toHaveURL((url) => url.origin === stand());
			await page.getByRole('button', { name }).click();
		};
		await portal(/^End it on/);
		await expect(async () => {
			await open(page);
			await expect(main).toContainText('The plan is cancelled and ends on', { timeout: 1000 });
		}).toPass({ timeout: 30_000 });
		await expect(main).toContainText('run out on');
		await portal(/^Keep the subscription/);
		await expect(async () => {
			await open(page);
			await expect(main).not.toContainText('The plan is cancelled', { timeout: 1000 });
		}).toPass({ timeout: 30_000 });
	});
});

test('paying works without script: the browser itself goes to the payment page and back', async ({
	page,
	browser
}) => {
	const person = newcomer();
	await settleIn(page, person, `Plain payers ${person.email}`);
	const context = await browser.newContext({
		javaScriptEnabled: false,
		storageState: await page.context().storageState()
	});
	const plain = await context.newPage();
	await plain.goto('/billing');
	await plain.locator('#packs').fill('1');
	await plain.getByRole('button', { name: 'See what they come to' }).click();
	await plain.getByRole('button', { name: 'Go on to payment' }).click();
	await expect(plain).toHaveURL((url) => url.origin === stand());
	await payBy(plain, '4242 4242 4242 4242');
	await expect(plain).toHaveURL(/\/billing\?done=pack$/);
	await expect(plain.getByRole('main')).toContainText('12 are left.');
	await context.close();
});

test('a session that nobody bought here, a forged one, and an event without a signature give nothing', async ({
	page,
	request
}) => {
	const person = newcomer();
	await settleIn(page, person, `Forgers ${person.email}`);
	for (const session of ['cs_test_invented', '', '../../x']) {
		const answer = await page.goto(`/billing/return?session=${encodeURIComponent(session)}`);
		expect(answer?.status()).toBe(404);
	}
	const body = { id: 'evt_x', object: 'event', type: 'checkout.session.completed', data: { object: {} } };
	const answer = await request.post('/webhooks/stripe', {
		data: body,
		headers: { 'stripe-signature': `t=${Math.floor(Date.now() / 1000)},v1=${'0'.repeat(64)}` }
	});
	expect(answer.status()).toBe(400);
	await open(page);
	await expect(page.getByRole('main')).toContainText('There is no plan.');
});

test('only the pages that lead to payment let a form lead there', async ({ page }) => {
	const person = newcomer();
	await settleIn(page, person, `Readers ${person.email}`);
	const policyOf = async (path: string) =>
		(await page.request.get(path)).headers()['content-security-policy'] ?? '';
	expect(await policyOf('/billing')).toContain(`form-action 'self' ${stand()}`);
	expect(await policyOf('/dossiers')).toMatch(/form-action 'self'(;|$)/);
});
