import { execFileSync, spawnSync } from 'node:child_process';
import { readFileSync } from 'node:fs';
import AxeBuilder from '@axe-core/playwright';
import { expect, test, type Browser, type Page } from '@playwright/test';
import { settled, signIn, temporaryFile, trustStore } from './support';
import { watch } from './watch';

/* A report leaves the house by a link: its author makes one, a client without an account reads, checks and downloads. */

const phone = { width: 390, height: 844 };
const tags = ['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa'];

/** Opens the page of links of the demo's issued report. */
async function openLinks(page: Page): Promise<void> {
	await page.goto('/reports?q=Coated+roof+sheet');
	const report = await page.getByRole('link', { name: 'Coated roof sheet' }).first().getAttribute('href');
	await page.goto(report ?? '');
	await expect(page.getByRole('link', { name: 'Download the signed PDF' })).toBeVisible({ timeout: 60_000 });
	await page.getByRole('link', { name: 'Links to this report' }).click();
	await expect(page).toHaveURL(/\/links$/);
	await settled(page);
}

async function makeLink(page: Page, recipient: string): Promise<string> {
	await page.getByLabel('Whom is it for?').fill(recipient);
	await page.getByLabel('after 30 days').check();
	await page.getByRole('button', { name: 'Make the link' }).click();
	const address = await page.getByLabel('Address', { exact: true }).inputValue();
	// Ready for the next one, with its usual choice.
	await expect(page.getByLabel('after 90 days')).toBeChecked();
	await expect(page.getByLabel('Whom is it for?')).toHaveValue('');
	expect(address).toMatch(/\/shared\/[A-Za-z0-9_-]{43}$/);
	return address;
}

async function stranger(browser: Browser, more: Parameters<Browser['newContext']>[0] = {}): Promise<Page> {
	const context = await browser.newContext({ viewport: phone, acceptDownloads: true, ...more });
	return context.newPage();
}

async function violations(page: Page): Promise<string[]> {
	const found = await new AxeBuilder({ page }).setLegacyMode(true).withTags(tags).analyze();
	return found.violations.flatMap(({ id, nodes }) =>
		nodes.map(({ target }) => `${id} at ${target.join(' ')}`)
	);
}

async function download(page: Page, name: RegExp): Promise<{ name: string; bytes: Buffer }> {
	const started = page.waitForEvent('download');
	await page.getByRole('link', { name }).click();
	const file = await started;
	return { name: file.suggestedFilename(), bytes: readFileSync(await file.path()) };
}

test('a client reads, checks and downloads by a link until it is revoked', async ({
	page,
	browser,
	baseURL
}) => {
	await signIn(page);
	await openLinks(page);
	const recipient = `S. Perrin ${Date.now()}`;
	const address = await makeLink(page, recipient);
	await expect(page.getByRole('row', { name: recipient })).toContainText('not yet');
	expect(await violations(page)).toEqual([]);

	const client = await stranger(browser);
	const faults = watch(client, baseURL ?? '');
	const answer = await client.goto(address);
	expect(answer?.status()).toBe(200);
	expect(answer?.headers()).toMatchObject({
		'referrer-policy': 'no-referrer',
		'x-robots-tag': 'noindex, nofollow',
		'cache-control': 'no-store'
	});
	await settled(client);
	const main = client.getByRole('main');
	await expect(main.getByRole('heading', { level: 1 })).toContainText('Coated roof sheet');
	await expect(main).toContainText('To Marrow Coast Housing Trust');
	await expect(main).toContainText('Genuine and unchanged.');
	await expect(main).toContainText(/(\d+) of \1 figures equal to the last digit/);
	await expect(client.getByRole('region', { name: 'The answer' })).toContainText('coverage interval');
	await expect(client.getByRole('region', { name: 'Review' })).toContainText(/reviewed/i);
	const wide = await client.evaluate(() => document.documentElement.scrollWidth);
	expect(wide).toBeLessThanOrEqual(phone.width);
	expect(await violations(client)).toEqual([]);

	const pdf = await download(client, /^Signed PDF/);
	expect(pdf.name).toMatch(/^TB-\d{4}-r1\.pdf$/);
	const record = await download(client, /^Computation record/);
	expect(JSON.parse(record.bytes.toString('utf8'))).toMatchObject({ format: 'noonmark-record/1' });
	const { root, store } = await trustStore(client);
	const file = temporaryFile('shared.pdf', pdf.bytes);
	const tool = execFileSync('pdfsig', ['-nssdir', `sql:${store}`, file], { encoding: 'utf8' });
	expect(tool).toContain('Signature is Valid');
	expect(tool).toContain('Certificate is Trusted');
	expect(tool).toContain('Total document signed');
	const command = spawnSync('npm', ['run', '-s', 'verify', '--', file, '--root', root], { encoding: 'utf8' });
	expect(command.status).toBe(0);
	expect(JSON.parse(command.stdout)).toMatchObject({ verdict: 'genuine', record: { recomputed: true } });
	expect(faults).toEqual([]);

	const readings = page.getByRole('row', { name: recipient });
	await page.reload();
	await settled(page);
	await expect(readings.getByRole('cell').nth(2)).toHaveText('1');
	await expect(page.getByLabel('Address', { exact: true })).toHaveCount(0);
	await readings.getByText('Revoke', { exact: false }).first().click();
	await readings.getByRole('button', { name: 'Revoke this link' }).click();
	await expect(page.getByRole('status').filter({ hasText: recipient })).toContainText(
		'shows nothing any more'
	);
	await expect(readings).toContainText('revoked');

	const gone = await client.goto(address);
	expect(gone?.status()).toBe(410);
	expect(gone?.headers()).toMatchObject({ 'referrer-policy': 'no-referrer', 'cache-control': 'no-store' });
	await expect(main.getByRole('heading', { level: 1 })).toHaveText('This link no longer works.');
	await expect(main).toContainText('Ask whoever sent it');
	expect(await client.content()).not.toMatch(/Coated|Marrow|Tallis|TB-\d/);
	expect(await violations(client)).toEqual([]);
	for (const part of ['report.pdf', 'record.json']) {
		const refused = await client.request.get(`${address}/${part}`);
		expect(refused.status(), part).toBe(410);
		expect(refused.headers()).toMatchObject({ 'x-robots-tag': 'noindex, nofollow' });
	}
	await client.context().close();
});

test('without script the same page is made, read and revoked', async ({ browser, page }) => {
	await signIn(page);
	await openLinks(page);
	const plain = await stranger(browser, {
		javaScriptEnabled: false,
		storageState: await page.context().storageState(),
		viewport: { width: 1280, height: 800 }
	});
	await plain.goto(page.url());
	await plain.getByRole('button', { name: 'Make the link' }).click();
	await expect(plain.getByRole('alert')).toContainText('Enter whom the link is for.');
	const recipient = `Plain ${Date.now()}`;
	const address = await makeLink(plain, recipient);
	const reader = await stranger(browser, { javaScriptEnabled: false });
	await reader.goto(address);
	await expect(reader.getByRole('main')).toContainText('Genuine and unchanged.');
	await reader.goto(`${address}/`);
	await expect(reader.getByRole('main')).toContainText('Genuine and unchanged.');
	const row = plain.getByRole('row', { name: recipient });
	await row.locator('summary').click();
	await row.getByRole('button', { name: 'Revoke this link' }).click();
	await expect(plain.getByRole('row', { name: recipient })).toContainText('revoked');
	expect((await reader.goto(address))?.status()).toBe(410);
	await reader.context().close();
	await plain.context().close();
});

test('an address that nobody was given shows nothing, and no answer is left without headers', async ({
	page,
	baseURL
}) => {
	const answer = await page.goto(`/shared/${'x'.repeat(43)}`);
	expect(answer?.status()).toBe(404);
	expect(answer?.headers()).toMatchObject({
		'referrer-policy': 'no-referrer',
		'x-robots-tag': 'noindex, nofollow'
	});
	await expect(page.getByRole('main')).toContainText('No report is shared at this address.');

	const file = await page.request.get('/mark.svg');
	expect(file.headers()).toMatchObject({ 'x-content-type-options': 'nosniff' });
	const foreign = await page.request.post('/sign-in', {
		headers: { origin: 'https://elsewhere.example' },
		form: { email: 'a@b.example' }
	});
	expect(foreign.status()).toBe(403);
	expect(foreign.headers()['content-security-policy']).toContain("frame-ancestors 'none'");
	expect(foreign.headers()['x-content-type-options']).toBe('nosniff');
	expect(new URL(page.url()).origin).toBe(new URL(baseURL ?? '').origin);
});
