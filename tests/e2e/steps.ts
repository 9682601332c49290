import { expect, type Locator, type Page } from '@playwright/test';
import { settled } from './support';

/* The guided form as the specs walk it. */

/** Starts a calculation in a dossier and chooses its method; stands at its first group of assumptions. */
export async function startCalculation(
	page: Page,
	dossier: string,
	{ title, kind = 'Find a value', method }: { title: string; kind?: string; method: RegExp }
): Promise<string> {
	await page.goto(`${dossier}/calculations/new`);
	await settled(page);
	await page.getByRole('radio', { name: kind }).check();
	await page.getByLabel('Title of this calculation').fill(title);
	await page.getByRole('button', { name: 'Continue to method' }).click();
	await expect(page).toHaveURL(/\/method$/);
	await settled(page);
	await page.getByRole('radio', { name: method }).check();
	await page.getByRole('button', { name: /^Continue/ }).click();
	await expect(page).toHaveURL(/\/inputs\//);
	await settled(page);
	return calculationOf(page);
}

/** Address of the calculation that a page belongs to. */
export function calculationOf(page: Page): string {
	const found = /\/calculations\/[0-9a-f-]{36}/.exec(page.url());
	if (found === null) throw new Error(`${page.url()} belongs to no calculation.`);
	return found[0];
}

/** A field of one assumption: `value`, `unit`, `spread`, `source`, or `p.` with a parameter of its spread. */
export function field(page: Page, input: string, part: string): Locator {
	return page.locator(`[id="in.${input}.${part}"]`);
}

export function runningAnswer(page: Page): Locator {
	return page.getByRole('region', { name: 'Running answer' });
}

/** What was typed is on the server. */
export async function saved(page: Page): Promise<void> {
	await expect(page.getByRole('status').filter({ hasText: /^\s*Saved/ })).toBeVisible();
}

export async function continueTo(page: Page, address: RegExp): Promise<void> {
	await page.getByRole('button', { name: /^Continue/ }).click();
	await expect(page).toHaveURL(address);
	await settled(page);
}
