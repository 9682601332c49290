import { expect, test, type Page } from '@playwright/test';
import { foundOrganisation, mailedPath, newcomer, settleIn, signUp, trySignIn } from './people';
import { settled } from './support';

/* From a stranger to a member, and back out again: with the mails as a mail server received them. */

const signedOutTo = /\/sign-in/;

async function signOut(page: Page): Promise<void> {
	await page.getByRole('button', { name: 'Sign out' }).click();
	await expect(page).toHaveURL(signedOutTo);
}

test('a short or a common password is refused beside the field, and what else was typed is kept', async ({
	page
}) => {
	const person = newcomer();
	for (const password of ['fourteen chars', 'passwordpassword']) {
		await signUp(page, { ...person, password });
		const field = page.getByLabel('Password', { exact: true });
		await expect(field).toHaveAttribute('aria-invalid', 'true');
		const summary = page.getByRole('alert');
		await expect(summary).toBeFocused();
		const beside = page.locator('#password-error');
		await expect(beside).toBeVisible();
		const message = ((await beside.textContent()) ?? '').replace(/^Fault:\s*/, '').trim();
		await expect(summary.getByRole('link', { name: message })).toHaveAttribute('href', '#password');
		await expect(page).toHaveTitle(/^1 fault: /);
		await expect(page.getByLabel('Your name')).toHaveValue(person.name);
		await expect(page.getByLabel('E-mail address')).toHaveValue(person.email);
	}
	await expect(page).toHaveURL(/\/sign-up$/);
});

test('sign-up, confirmation by mail, first organisation, sign-out', async ({ page }) => {
	const person = newcomer();
	await signUp(page, person);
	await expect(page).toHaveURL(/\/sign-up\/confirm$/);
	await expect(page.getByRole('main')).toContainText(person.email);
	const link = await mailedPath(page, person.email, /^\/confirm\//);

	await trySignIn(page, person);
	await expect(page.getByRole('alert')).toContainText('confirm your address first');

	await page.goto(link);
	await settled(page);
	await expect(page.getByRole('main')).toContainText(person.email);
	// Whoever merely holds the link, without the password, gets no account by it.
	await page.getByLabel('Password', { exact: true }).fill('not-the-password-of-it');
	await page.getByRole('button', { name: 'Confirm and sign in' }).click();
	await expect(page.getByRole('alert')).toBeVisible();
	await page.getByLabel('Password', { exact: true }).fill(person.password);
	await page.getByRole('button', { name: 'Confirm and sign in' }).click();
	await foundOrganisation(page, 'Aldous Surveys');
	await expect(page.getByRole('link', { name: 'Aldous Surveys' })).toBeVisible();
	await expect(page.getByRole('main')).toContainText('There is none yet');

	await page.goto(link);
	await expect(page.getByRole('heading', { level: 1 })).toHaveText('This link does not work any more.');
	await page.goto('/dossiers');
	await signOut(page);
	await page.goto('/dossiers');
	await expect(page).toHaveURL(/\/sign-in\?returnTo=%2Fdossiers/);
	// Going back shows no page of the session that has ended.
	await page.goBack();
	await expect(page.getByRole('heading', { level: 1 })).toHaveText('Sign in');
});

test('a forgotten password is replaced by mail, which ends every session', async ({ page, browser }) => {
	const person = newcomer();
	await settleIn(page, person, 'Aldous Surveys');
	const other = await (await browser.newContext()).newPage();
	await other.goto('/reset');
	await settled(other);
	await other.getByLabel('E-mail address').fill(person.email);
	await other.getByRole('button', { name: 'Send the link' }).click();
	await expect(other.getByRole('heading', { level: 1 })).toHaveText('Look into your mailbox');
	const link = await mailedPath(other, person.email, /^\/reset\//);
	await other.goto(link);
	await settled(other);
	await other.getByLabel('New password', { exact: true }).fill('short');
	await other.getByRole('button', { name: 'Set the password' }).click();
	await expect(other.getByRole('alert')).toContainText('15');
	const password = `${person.password}-again`;
	await other.getByLabel('New password', { exact: true }).fill(password);
	await other.getByRole('button', { name: 'Set the password' }).click();
	await expect(other).toHaveURL(/\/sign-in\?notice=password-changed/);

	await page.goto('/dossiers');
	await expect(page).toHaveURL(signedOutTo);
	await trySignIn(other, person);
	await expect(other.getByRole('alert')).toContainText('do not belong together');
	await trySignIn(other, { ...person, password });
	await expect(other).toHaveURL(/\/dossiers$/);
	await other.goto(link);
	await expect(other.getByRole('heading', { level: 1 })).toHaveText('This link does not work any more.');
	await other.context().close();
});

test('a reset says the same of an address that has no account', async ({ page }) => {
	await page.goto('/reset');
	await settled(page);
	const stranger = newcomer().email;
	await page.getByLabel('E-mail address').fill(stranger);
	await page.getByRole('button', { name: 'Send the link' }).click();
	await expect(page.getByRole('heading', { level: 1 })).toHaveText('Look into your mailbox');
	await expect(page.getByRole('main')).toContainText(`If ${stranger} has an account here`);
});

test('a session elsewhere is ended from the account page, and is out at its next request', async ({
	page,
	browser
}) => {
	const person = newcomer();
	await settleIn(page, person, 'Aldous Surveys');
	const other = await (await browser.newContext()).newPage();
	await trySignIn(other, person);
	await expect(other).toHaveURL(/\/dossiers$/);

	await page.goto('/account');
	await settled(page);
	const sessions = page.locator('#sessions-section').getByRole('listitem');
	await expect(sessions).toHaveCount(2);
	const elsewhere = sessions.filter({ hasNotText: 'this one' });
	await expect(elsewhere).toHaveCount(1);
	await elsewhere.getByRole('button', { name: /^End/ }).click();
	await expect(page.getByRole('status')).toContainText('That session has ended.');
	await expect(sessions).toHaveCount(1);

	await other.goto('/account');
	await expect(other).toHaveURL(signedOutTo);
	await page.reload();
	await expect(page.getByRole('heading', { level: 1 })).toHaveText(person.name);
	await other.context().close();
});
