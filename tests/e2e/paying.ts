import type { Page } from '@playwright/test';

/** Where the stand-in for payments has its pages. */
export const stand = () => {
	const address = process.env.E2E_STRIPE ?? '';
	if (address === '') throw new Error('These tests pay at the stand-in for payments.');
	return address;
};

/** Fills in the card on the payment page and pays. */
export async function payBy(page: Page, card: string): Promise<void> {
	await page.getByLabel('Card number').fill(card);
	await page.getByLabel(/expir/i).fill('12/40');
	await page.getByLabel(/code|cvc/i).fill('123');
	await page.getByLabel(/name/i).fill('Runa Aldous');
	const email = page.getByLabel(/mail/i);
	if ((await email.count()) > 0) await email.fill('runa@example.org');
	await page.getByRole('button', { name: /^Pay/ }).click();
}
