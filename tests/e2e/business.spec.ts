import { execFileSync } from 'node:child_process';
import { expect, test, type Browser, type Page } from '@playwright/test';
import { mailTo } from './house';
import { signUpFrom, toInvitation } from './joining';
import { payBy, stand } from './paying';
import { mailedPath, newcomer, settleIn, type Newcomer } from './people';
import { settled, temporaryFile, trustStore } from './support';
import { writeDraft } from './writing';

/* The report leaves the house only when somebody else has read it and somebody has paid for it: from end to end. */

const statement = 'Both values checked against the table, the record computed again.';

async function pageFor(browser: Browser, more: Parameters<Browser['newContext']>[0] = {}): Promise<Page> {
	return (await browser.newContext(more)).newPage();
}

/** Issues a draft at once, as a rule of the new organisation lets its author do. */
async function issueAtOnce(page: Page, report: string): Promise<void> {
	await page.goto(`${report}/issue`);
	await settled(page);
	await page.getByRole('button', { name: 'Issue and sign' }).click();
	await expect(page.getByRole('link', { name: 'Download the signed PDF' })).toBeVisible({ timeout: 90_000 });
}

/** Without an address on its letterhead an organisation issues nothing. */
async function fillLetterhead(page: Page): Promise<void> {
	await page.goto('/organisation');
	await settled(page);
	await page.getByLabel('Postal address').fill('3 Mill Yard\nAldous');
	await page.getByRole('button', { name: 'Save', exact: true }).click();
	await expect(page.getByRole('status').first()).toContainText('saved');
}

/** Another draft on the same result. */
async function anotherDraft(page: Page, dossier: string): Promise<string> {
	await page.goto(`${dossier}/reports/new`);
	await settled(page);
	await page.getByRole('radio').first().check();
	await page.getByRole('button', { name: 'Make a draft' }).click();
	await expect(page).toHaveURL(/\/reports\/[0-9a-f-]{36}$/);
	await settled(page);
	return page.url();
}

async function inviteGuest(owner: Page, dossier: string, guest: Newcomer): Promise<string> {
	await owner.goto(`${dossier}/people`);
	await settled(owner);
	await owner.getByLabel('Their e-mail address').fill(guest.email);
	await owner.getByRole('button', { name: 'Send the invitation' }).click();
	await expect(owner.getByRole('status')).toContainText('on its way');
	return mailedPath(owner, guest.email, toInvitation);
}

async function send(author: Page, report: string, reviewer: Newcomer): Promise<void> {
	await author.goto(report);
	await settled(author);
	await author.getByRole('button', { name: 'Save and send for review' }).click();
	await expect(author).toHaveURL(/\/send$/);
	await settled(author);
	await author.getByRole('checkbox', { name: new RegExp(`^${reviewer.name}`) }).check();
	await author.getByRole('button', { name: 'Send for review' }).click();
	await expect(author.getByRole('main')).toContainText(`In review with ${reviewer.name}`);
}

/** Follows the link of the newest mail to the reviewer. */
async function openReview(reader: Page, reviewer: Newcomer): Promise<void> {
	await reader.goto(await mailedPath(reader, reviewer.email, /\/review\?/));
	await settled(reader);
}

test('invited, reviewed, paid for, issued, and read by a client on a phone', async ({ browser }) => {
	test.setTimeout(420_000);
	const owner = newcomer();
	const author = await pageFor(browser);
	await settleIn(author, owner, `Aldous Surveys ${owner.email}`);
	await fillLetterhead(author);
	const report = await test.step('both exports to try are used', async () => {
		const first = await writeDraft(author);
		await author.getByRole('link', { name: 'Clay tiles, Upper Row' }).first().click();
		await expect(author).toHaveURL(/\/dossiers\/[0-9a-f-]{36}$/);
		const dossier = author.url();
		await issueAtOnce(author, first);
		await issueAtOnce(author, await anotherDraft(author, dossier));
		return { address: await anotherDraft(author, dossier), dossier };
	});
	const reviewer = newcomer();
	const reader = await pageFor(browser);
	await test.step('the owner invites a guest reviewer, who accepts', async () => {
		const invitation = await inviteGuest(author, report.dossier, reviewer);
		await signUpFrom(reader, invitation, reviewer);
		await reader.getByRole('button', { name: 'Accept' }).click();
		await expect(reader).toHaveURL(report.dossier);
	});
	await test.step('the author sends, the reviewer returns', async () => {
		await send(author, report.address, reviewer);
		await openReview(reader, reviewer);
		await reader.getByLabel(/^Return it/).fill('Say that the tile is new.');
		await reader.getByRole('button', { name: 'Return to the author' }).click();
		await expect(reader).toHaveURL(/\?done=returned$/);
		const mail = await mailTo(author.request, owner.email, /return/i);
		expect(mail.text).toContain('Say that the tile is new.');
	});
	await test.step('the author mends and sends again, the reviewer approves', async () => {
		await author.goto(report.address);
		await settled(author);
		await expect(author.getByRole('main')).toContainText('Say that the tile is new.');
		await author.getByLabel('Commentary').fill('The tile is new; it darkens with age.');
		await send(author, report.address, reviewer);
		await openReview(reader, reviewer);
		await reader.getByRole('link', { name: 'Go on to approve' }).click();
		await settled(reader);
		await reader.getByLabel('Your statement').fill(statement);
		await reader.getByRole('button', { name: 'Approve the report' }).click();
		await expect(reader).toHaveURL(/\?done=approved$/);
	});
	await test.step('the export beyond the quota is refused, with the way to more', async () => {
		await author.goto(`${report.address}/issue`);
		await settled(author);
		await author.getByRole('button', { name: 'Issue and sign' }).click();
		await expect(author.getByRole('alert')).toContainText('No export is left');
		await expect(author.getByRole('main')).toContainText('Nothing is lost');
		await author.getByRole('link', { name: 'Get more exports' }).click();
		await expect(author).toHaveURL(/\/billing$/);
		await settled(author);
	});
	await test.step('the owner subscribes: a declined card first, then a good one', async () => {
		await author.locator('#plan #seats').fill('1');
		await author.locator('#plan').getByRole('button', { name: 'See what it comes to' }).click();
		await expect(author.getByRole('heading', { level: 1 })).toContainText('Individual');
		await author.getByRole('button', { name: 'Go on to payment' }).click();
		await expect(author).toHaveURL((url) => url.origin === stand());
		await payBy(author, '4000 0000 0000 0002');
		await expect(author.locator('body')).toContainText(/declined/i);
		await payBy(author, '4242 4242 4242 4242');
		await expect(author).toHaveURL(/\/billing\?done=plan$/);
		await expect(author.getByRole('main')).toContainText('5 are left.');
	});
	await test.step('the author issues what was approved', async () => {
		await author.goto(report.address);
		await settled(author);
		await expect(author.getByRole('main')).toContainText(statement);
		await author.getByRole('link', { name: 'Issue it' }).click();
		await settled(author);
		await author.getByRole('button', { name: 'Issue and sign' }).click();
		await expect(author.getByRole('link', { name: 'Download the signed PDF' })).toBeVisible({
			timeout: 90_000
		});
		await author.goto('/billing');
		await expect(author.getByRole('main')).toContainText('4 are left.');
		await mailTo(reader.request, reviewer.email, /issued/i);
	});
	const link = await test.step('a link is made for the client', async () => {
		await author.goto(`${report.address}/links`);
		await settled(author);
		await author.getByLabel('Whom is it for?').fill('Upper Row Trust');
		await author.getByRole('button', { name: 'Make the link' }).click();
		return author.getByLabel('Address', { exact: true }).inputValue();
	});
	await test.step('the client reads and verifies on a phone, without an account', async () => {
		const client = await pageFor(browser, { viewport: { width: 390, height: 844 }, acceptDownloads: true });
		await client.goto(link);
		await settled(client);
		const main = client.getByRole('main');
		await expect(main).toContainText('Genuine and unchanged.');
		await expect(main).toContainText(statement);
		expect(await client.evaluate(() => document.documentElement.scrollWidth)).toBeLessThanOrEqual(390);
		const answer = await client.request.get(`${link}/report.pdf`);
		expect(answer.status()).toBe(200);
		const file = temporaryFile('client.pdf', await answer.body());
		const { store } = await trustStore(client);
		const tool = execFileSync('pdfsig', ['-nssdir', `sql:${store}`, file], { encoding: 'utf8' });
		expect(tool).toContain('Signature is Valid');
		expect(tool).toContain('Certificate is Trusted');
		expect(tool).toContain('Total document signed');
		await client.context().close();
	});
	await author.context().close();
	await reader.context().close();
});
