import { expect, type Page } from '@playwright/test';
import { mailedPath, type Newcomer } from './people';
import { settled } from './support';

/** The link of an invitation, as it stands in the mail. */
export const toInvitation = /^\/invitation\/[\w-]{43}$/;

/** From an invitation's page through sign-up and the mail that confirms the address back to the invitation. */
export async function signUpFrom(page: Page, invitation: string, person: Newcomer): Promise<void> {
	await page.goto(invitation);
	await settled(page);
	await page.getByRole('main').getByRole('link', { name: 'Make an account' }).click();
	await expect(page).toHaveURL(/\/sign-up\?returnTo=/);
	await settled(page);
	// The address need not be typed again.
	await expect(page.getByLabel('E-mail address')).toHaveValue(person.email);
	await page.getByLabel('Your name').fill(person.name);
	await page.getByLabel('Password', { exact: true }).fill(person.password);
	await page.getByRole('button', { name: 'Make the account' }).click();
	await expect(page).toHaveURL(/\/sign-up\/confirm/);
	await page.goto(await mailedPath(page, person.email, /^\/confirm\//));
	await settled(page);
	await page.getByLabel('Password', { exact: true }).fill(person.password);
	await page.getByRole('button', { name: 'Confirm and sign in' }).click();
	await expect(page).toHaveURL(new RegExp(`${invitation}$`));
	await settled(page);
}
