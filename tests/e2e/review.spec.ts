import { execFileSync } from 'node:child_process';
import { expect, test, type Browser, type Page } from '@playwright/test';
import { mailTo, signIns } from './house';
import { demoPage, trySignIn } from './people';
import { settled, temporaryFile } from './support';
import { writeDraft } from './writing';

/* A report is read by somebody who did not write it: remarks, a figure of their own, returned, mended, approved, printed. */

const statement = 'Read line by line; every record computed again. The bound by hand holds.';

async function pageOf(browser: Browser, email: string): Promise<Page> {
	const person = signIns.find((one) => one.email === email);
	if (person === undefined) throw new Error(`The demo has nobody at ${email}.`);
	const context = await browser.newContext();
	const page = await context.newPage();
	await trySignIn(page, person);
	await expect(page).toHaveURL(/\/dossiers/);
	return page;
}

async function send(page: Page, note: string): Promise<void> {
	await page.getByRole('button', { name: 'Save and send for review' }).click();
	await expect(page).toHaveURL(/\/send$/);
	await settled(page);
	const colm = page.getByRole('checkbox', { name: /^Colm Hadley/ });
	await colm.check();
	await expect(page.getByRole('checkbox', { name: /^Ines Tarrow/ })).toHaveCount(0);
	await page.getByLabel('What should they look at?').fill(note);
	await page.getByRole('button', { name: 'Send for review' }).click();
	await expect(page).toHaveURL(/\?done=sent$/);
	await expect(page.getByRole('main')).toContainText('In review with Colm Hadley');
}

test('a report is remarked on, returned, mended, approved and printed with what the reviewer said', async ({
	browser
}) => {
	test.setTimeout(300_000);
	const author = await demoPage(browser);
	const report = await writeDraft(author);
	const number = /[A-Z]+-\d{4}/.exec((await author.locator('h1').textContent()) ?? '')?.[0] ?? '';
	await send(author, 'Please look at the emittance.');

	const reader = await pageOf(browser, 'colm.hadley@tallisbrook.example');
	const mail = await mailTo(reader.request, 'colm.hadley@tallisbrook.example', new RegExp(number));
	expect(mail.links.map((link) => new URL(link).pathname)).toContain(`${new URL(report).pathname}/review`);
	const waiting = reader.getByRole('region', { name: 'Waiting for your review' });
	await waiting.getByRole('listitem').filter({ hasText: number }).getByRole('link').click();
	await expect(reader).toHaveURL(/\/review$/);
	await settled(reader);
	await expect(reader.getByRole('main')).toContainText('“Please look at the emittance.”');

	// Every record again.
	await reader.getByRole('button', { name: 'Compute again' }).click();
	await expect(reader.getByText(/figures compared, every one the same to the last digit/)).toBeVisible();

	// A remark on an assumption; an empty one is refused beside its field.
	await reader.getByRole('link', { name: /^Remark\s*on thermal emittance/i }).click();
	const form = reader.getByRole('textbox', { name: /^Your remark on/ });
	await expect(form).toBeFocused();
	await reader.getByRole('button', { name: 'Put the remark' }).click();
	await expect(reader.getByRole('alert')).toContainText('Write the remark.');
	await form.fill('Was it measured on a weathered tile?');
	await reader.getByRole('button', { name: 'Put the remark' }).click();
	await expect(reader.getByRole('article', { name: 'Remark by Colm Hadley' })).toContainText(
		'weathered tile'
	);
	await expect(form).toHaveCount(0);

	// A figure of the reviewer's own; what was typed stays where it is refused.
	await reader
		.getByRole('link', { name: /^Enter a figure of your own/ })
		.first()
		.click();
	await reader.getByRole('radio', { name: /^an upper bound/ }).check();
	await reader.getByLabel('Value', { exact: true }).fill('forty-five');
	await reader.getByLabel('By which route?').fill('White tile of the same table, by hand');
	await reader.getByRole('button', { name: 'Enter the figure' }).click();
	await expect(reader.getByRole('alert')).toBeVisible();
	await expect(reader.getByLabel('By which route?')).toHaveValue('White tile of the same table, by hand');
	await reader.getByLabel('Value', { exact: true }).fill('45');
	await reader.getByLabel('What else does it average?').fill('the new tile, at one instant');
	await reader.getByRole('button', { name: 'Enter the figure' }).click();
	await expect(reader.getByRole('main')).toContainText('White tile of the same table, by hand');

	await reader.getByLabel(/^Return it/).fill('Say whether the tile was weathered.');
	await reader.getByRole('button', { name: 'Return to the author' }).click();
	await expect(reader).toHaveURL(/\?done=returned$/);

	// The author sees reasons on top and the remark, answers it where the report is written, and sends it again.
	await author.goto(report);
	await settled(author);
	const main = author.getByRole('main');
	await expect(main).toContainText('Say whether the tile was weathered.');
	await author.getByLabel(/^Your answer to Colm Hadley/).fill('New tile; the commentary says so now.');
	await author.getByLabel('Commentary').fill('The value is that of the new tile.');
	await author.getByRole('button', { name: 'Save', exact: true }).click();
	await expect(author.getByRole('status').filter({ hasText: /^\s*Saved/ })).toBeVisible();
	await expect(main).toContainText('New tile; the commentary says so now.');
	await send(author, '');

	// What changed is marked in words, and listed on top.
	await reader.goto(`${report}/review`);
	await settled(reader);
	await reader.getByRole('link', { name: 'Opinion of the author', exact: true }).click();
	await expect(reader.getByRole('main')).toContainText('New since the last look.');
	await expect(reader.getByRole('article', { name: 'Remark by Colm Hadley' })).toContainText(
		'New tile; the commentary says so now.'
	);
	await reader.getByRole('button', { name: /^Settled/ }).click();
	await expect(reader.getByText(/^Settled by Colm Hadley/)).toBeVisible();
	await reader.getByRole('link', { name: 'Go on to approve' }).click();
	await settled(reader);
	await expect(reader.getByRole('main')).toContainText('Your approval covers all of this');
	await reader.getByLabel('Your statement').fill(statement);
	await reader.getByRole('button', { name: 'Approve the report' }).click();
	await expect(reader).toHaveURL(/\?done=approved$/);
	await expect(reader.getByRole('main')).toContainText('Approved by Colm Hadley');

	await author.goto(report);
	await settled(author);
	await expect(main).toContainText(statement);
	await author.getByRole('link', { name: 'Issue it' }).click();
	await settled(author);
	await author.getByRole('button', { name: 'Issue and sign' }).click();
	const link = author.getByRole('link', { name: 'Download the signed PDF' });
	await expect(link).toBeVisible({ timeout: 90_000 });
	const answer = await author.request.get((await link.getAttribute('href')) ?? '');
	expect(answer.status()).toBe(200);
	const file = temporaryFile('reviewed.pdf', await answer.body());
	const text = execFileSync('pdftotext', ['-layout', file, '-'], { encoding: 'utf8' }).replace(/\s+/g, ' ');
	expect(text).toContain(statement);
	expect(text).toContain('Colm Hadley');
	expect(text).toContain('White tile of the same table, by hand');
	expect(text).not.toContain('not independently reviewed');
	await reader.context().close();
	await author.context().close();
});

test('a remark is put and a report returned without script', async ({ browser }) => {
	test.setTimeout(200_000);
	const author = await demoPage(browser);
	const report = await writeDraft(author);
	await send(author, '');
	const signedIn = await pageOf(browser, 'colm.hadley@tallisbrook.example');
	const context = await browser.newContext({
		javaScriptEnabled: false,
		storageState: await signedIn.context().storageState(),
		viewport: { width: 360, height: 740 }
	});
	const reader = await context.newPage();
	await reader.goto(`${report}/review`);
	await reader
		.getByRole('link', { name: /^Remark\s*on solar reflectance/i })
		.first()
		.click();
	await reader.getByRole('button', { name: 'Put the remark' }).click();
	await expect(reader.getByRole('alert')).toContainText('Write the remark.');
	await reader.getByRole('textbox', { name: /^Your remark on/ }).fill('Which table?');
	await reader.getByRole('button', { name: 'Put the remark' }).click();
	await expect(reader.getByRole('article', { name: 'Remark by Colm Hadley' })).toContainText('Which table?');
	expect(await reader.evaluate(() => document.documentElement.scrollWidth)).toBeLessThanOrEqual(360);
	await reader.getByLabel(/^Return it/).fill('Name the table.');
	await reader.getByRole('button', { name: 'Return to the author' }).click();
	await expect(reader.getByRole('main')).toContainText('Name the table.');

	await author.goto(report);
	await settled(author);
	await expect(author.getByLabel(/^Your answer to Colm Hadley/)).toBeVisible();
	await context.close();
	await signedIn.context().close();
	await author.context().close();
});
