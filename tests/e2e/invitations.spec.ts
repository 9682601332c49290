import { expect, test, type Page } from '@playwright/test';
import { signUpFrom, toInvitation } from './joining';
import { demoPage, mailedPath, newcomer, settleIn, signUp, trySignIn } from './people';
import { newDossier, settled } from './support';

/* How people come in, are told why not, and go again: with the mails as a mail server received them. */

async function inviteMember(owner: Page, email: string, role = 'reader'): Promise<string> {
	await owner.goto('/organisation');
	await settled(owner);
	const form = owner.locator('form[action="?/invite"]');
	await form.getByLabel('Their e-mail address').fill(email);
	for (const box of await form.getByRole('checkbox').all()) {
		await box.setChecked((await box.getAttribute('value')) === role);
	}
	await form.getByRole('button', { name: 'Send the invitation' }).click();
	await expect(owner.getByRole('status')).toContainText(`The invitation is on its way to ${email}.`);
	return mailedPath(owner, email, toInvitation);
}

test('a newcomer is invited, makes an account, comes back and accepts; and is taken out again', async ({
	page,
	browser
}) => {
	const owner = await demoPage(browser);
	const person = newcomer();
	const invitation = await inviteMember(owner, person.email);
	const open = owner.locator('form[action="?/resend"]');
	await expect(owner.getByText(person.email, { exact: true })).toBeVisible();
	expect(await open.count()).toBeGreaterThan(0);

	await page.goto(invitation);
	await expect(page.getByRole('heading', { level: 1 })).toHaveText('Work with Tallis Brook Consulting');
	await expect(page.getByRole('main')).toContainText('Ines Tarrow invites you');
	await signUpFrom(page, invitation, person);
	await expect(page.getByRole('main')).toContainText(`You are signed in as ${person.name}`);
	await page.getByRole('button', { name: 'Accept' }).click();
	await expect(page).toHaveURL(/\/dossiers$/);
	await expect(page.getByRole('link', { name: 'Tallis Brook Consulting' })).toBeVisible();
	// A reader is offered nothing to write with, and nothing to pay.
	await expect(page.getByRole('link', { name: 'New dossier' })).toHaveCount(0);
	await expect(page.getByRole('navigation', { name: 'Main' })).not.toContainText('Billing');
	await page.goto(invitation);
	await expect(page.getByRole('main')).toContainText('You have accepted this invitation.');

	await owner.reload();
	await settled(owner);
	const row = owner.locator('#members li').filter({ hasText: person.email });
	await expect(row).toContainText('reader');
	const removal = row.locator('details').filter({ hasText: 'Take' });
	await removal.getByText(/^Take .* out …/).click();
	await removal.getByRole('button', { name: /^Take/ }).click();
	await expect(owner.getByRole('alert')).toContainText('Tick the box');
	await row.getByRole('checkbox', { name: /is to be taken out/ }).check();
	await row.getByRole('button', { name: /^Take/ }).click();
	await expect(owner.getByRole('status')).toContainText('The member is taken out');
	await expect(row).toHaveCount(0);
	// Their next click finds nothing of it.
	await page.goto('/dossiers');
	await expect(page).toHaveURL(/\/organisation\/new$/);
	await page.goto(invitation);
	await expect(page.getByRole('main')).toContainText('has been used already');
	await owner.context().close();
});

test('a wrong account is told so, signs out and comes back', async ({ page, browser }) => {
	const owner = await demoPage(browser);
	const invited = newcomer();
	const invitation = await inviteMember(owner, invited.email);
	const wrong = newcomer();
	await settleIn(page, wrong, 'Aldous Surveys');
	await page.goto(invitation);
	await settled(page);
	const main = page.getByRole('main');
	await expect(main).toContainText('This invitation is for another account.');
	await expect(main).toContainText(`you are signed in as ${wrong.email}`);
	await expect(main).toContainText('r…@example.org');
	await expect(main).not.toContainText(invited.email);
	await expect(page.getByRole('button', { name: 'Accept' })).toHaveCount(0);
	// Asked for without the button, the server refuses as well.
	const origin = new URL(page.url()).origin;
	const forced = await page.request.post(invitation, { form: {}, headers: { origin } });
	expect(forced.status()).toBe(403);

	await page.getByRole('button', { name: 'Sign out and come back' }).click();
	await expect(page).toHaveURL(/\/sign-in\?notice=signed-out&returnTo=/);
	await settled(page);
	await page.getByLabel('E-mail').fill(wrong.email);
	await page.getByLabel('Password', { exact: true }).fill(wrong.password);
	await page.getByRole('main').getByRole('button', { name: 'Sign in' }).click();
	await expect(page).toHaveURL(new RegExp(`${invitation}$`));
	await owner.context().close();
});

test('without script: a poor address is told beside the field; sent again, taken back', async ({
	page,
	browser
}) => {
	const owner = await demoPage(browser, 'Tallis Brook Consulting', { javaScriptEnabled: false });
	const person = newcomer();
	await owner.goto('/organisation');
	const form = owner.locator('form[action="?/invite"]');
	await form.getByLabel('Their e-mail address').fill('no address');
	await form.getByRole('checkbox', { name: /^author/ }).uncheck();
	await form.getByRole('checkbox', { name: /^billing/ }).check();
	await form.getByRole('button', { name: 'Send the invitation' }).click();
	await expect(owner.locator('#email-error')).toContainText('Enter an e-mail address');
	await expect(form.getByLabel('Their e-mail address')).toHaveValue('no address');
	await expect(form.getByRole('checkbox', { name: /^billing/ })).toBeChecked();
	await expect(form.getByRole('checkbox', { name: /^author/ })).not.toBeChecked();
	await form.getByLabel('Their e-mail address').fill(person.email);
	await form.getByRole('button', { name: 'Send the invitation' }).click();
	await expect(owner.getByRole('status')).toContainText('on its way');
	const first = await mailedPath(owner, person.email, toInvitation);

	await owner.getByRole('button', { name: `Send again to ${person.email}` }).click();
	await expect(owner.getByRole('status')).toContainText('on its way');
	let second = first;
	await expect(async () => {
		second = await mailedPath(owner, person.email, toInvitation);
		expect(second).not.toBe(first);
	}).toPass();
	expect((await page.goto(first))?.status()).toBe(404);
	expect((await page.goto(second))?.status()).toBe(200);
	await expect(page.getByRole('main')).toContainText(person.email);

	await owner.getByRole('button', { name: `Take back the invitation of ${person.email}` }).click();
	await expect(owner.getByRole('status')).toContainText(`The invitation of ${person.email} is taken back.`);
	await page.goto(second);
	await expect(page.getByRole('main')).toContainText('This invitation was taken back.');
	await expect(page.getByRole('main').getByRole('link', { name: 'Sign in' })).toHaveCount(0);
	expect((await page.goto(`/invitation/${'x'.repeat(43)}`))?.status()).toBe(404);
	await owner.context().close();
});

test('a guest reviews one dossier and nothing else, takes no seat, and leaves', async ({ page, browser }) => {
	const founder = newcomer();
	const owner = await (await browser.newContext()).newPage();
	await settleIn(owner, founder, 'Aldous Surveys');
	const dossier = await newDossier(owner, 'Barn roofs', 'How hot do they get?', 'A farm');
	const other = await newDossier(owner, 'Barn yards', 'How hot does it get?', 'Another farm');
	await owner.goto(dossier);
	await owner.getByRole('link', { name: 'People and guest reviewers' }).click();
	await settled(owner);
	const guest = newcomer();
	await owner.getByLabel('Their e-mail address').fill(guest.email);
	await owner.getByRole('button', { name: 'Send the invitation' }).click();
	await expect(owner.getByRole('status')).toContainText('on its way');
	const invitation = await mailedPath(owner, guest.email, toInvitation);

	await page.goto(invitation);
	await expect(page.getByRole('main')).toContainText('Barn roofs');
	await signUpFrom(page, invitation, guest);
	await page.getByRole('button', { name: 'Accept' }).click();
	await expect(page).toHaveURL(dossier);
	await settled(page);
	await expect(page.getByRole('heading', { level: 1 })).toHaveText('Barn roofs');
	await expect(page.getByRole('link', { name: 'Aldous Surveys, as guest' })).toBeVisible();
	for (const name of ['Edit the dossier', 'New calculation', 'New report']) {
		await expect(page.getByRole('link', { name })).toHaveCount(0);
	}
	for (const name of ['Add the file', 'Delete this dossier']) {
		await expect(page.getByRole('button', { name })).toHaveCount(0);
	}
	const origin = new URL(page.url()).origin;
	const forced = await page.request.post(`${dossier}?/delete`, { form: {}, headers: { origin } });
	expect(forced.status()).toBe(403);
	await page.goto('/dossiers');
	await expect(page.getByRole('main')).not.toContainText('Barn yards');
	for (const path of [other, '/organisation', '/billing']) {
		expect((await page.goto(path))?.status(), path).toBe(404);
	}

	await owner.reload();
	await settled(owner);
	await expect(owner.getByRole('main')).toContainText(guest.email);
	await owner.goto('/organisation');
	await expect(owner.locator('#seats')).toContainText('1 of 1 seat taken');

	// The same person as a member finds no seat, and is told whom to ask.
	const member = await inviteMember(owner, guest.email, 'author');
	await page.goto(member);
	await settled(page);
	await page.getByRole('button', { name: 'Accept' }).click();
	await expect(page.getByRole('alert')).toContainText('Every seat of Aldous Surveys is taken.');
	await expect(page.getByRole('alert')).toContainText(founder.email);
	await expect(page.getByRole('button', { name: 'Accept' })).toBeVisible();

	await page.goto(`${dossier}/people`);
	await settled(page);
	await expect(page.getByRole('main')).not.toContainText(founder.email);
	await page.getByText('Leave this dossier …').click();
	await page.getByRole('checkbox', { name: /I am leaving/ }).check();
	await page.getByRole('button', { name: 'Leave this dossier' }).click();
	await expect(page).toHaveURL(/\/account/);
	await expect(page.getByRole('status')).toContainText('You have left.');
	await page.goto(dossier);
	await expect(page).toHaveURL(/\/organisation\/new$/);
	await owner.context().close();
});

test('the last owner cannot leave, and is told what to do first', async ({ page }) => {
	const person = newcomer();
	await settleIn(page, person, 'Aldous Surveys');
	await page.goto('/account#organisations');
	await settled(page);
	await page.getByText('Leave Aldous Surveys …').click();
	await page.getByRole('checkbox', { name: /I am leaving/ }).check();
	await page.getByRole('button', { name: 'Leave Aldous Surveys' }).click();
	await expect(page.getByRole('alert')).toContainText('Make somebody else an owner first');
	await page.goto('/dossiers');
	await expect(page.getByRole('link', { name: 'Aldous Surveys' })).toBeVisible();
});

test('signing up again with a known address leads back to the invitation by mail', async ({
	page,
	browser
}) => {
	const owner = await demoPage(browser);
	const person = newcomer();
	await settleIn(page, person, 'Aldous Surveys');
	const invitation = await inviteMember(owner, person.email);
	const elsewhere = await (await browser.newContext()).newPage();
	await signUp(elsewhere, person, `/sign-up?returnTo=${encodeURIComponent(invitation)}`);
	await expect(elsewhere).toHaveURL(/\/sign-up\/confirm/);
	const link = await mailedPath(elsewhere, person.email, /^\/sign-in/);
	await trySignIn(elsewhere, person, link);
	await expect(elsewhere).toHaveURL(new RegExp(`${invitation}$`));
	await elsewhere.context().close();
	await owner.context().close();
});
