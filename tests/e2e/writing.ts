import { expect, type Page } from '@playwright/test';
import { continueTo, field, startCalculation } from './steps';
import { newDossier, settled } from './support';

/* The shortest way to a draft that may leave the house. */

const table = 'The Engineering Guide to LEED - New Construction, table 2.7.3: red clay tile';

async function cite(page: Page, input: string): Promise<void> {
	const source = page.locator('details').filter({ has: page.locator(`[id="in.${input}.source"]`) });
	await source.locator('summary').click();
	await page.locator(`[id="in.${input}.source"]`).selectOption('citation');
	await page.locator(`[id="in.${input}.sourceText"]`).fill(table);
}

/** A draft with one computed result. @returns its address */
export async function writeDraft(page: Page): Promise<string> {
	const dossier = await newDossier(
		page,
		'Clay tiles, Upper Row',
		'How bright is the tile?',
		'Upper Row Trust'
	);
	await startCalculation(page, dossier, { title: 'Tile of Upper Row', method: /solar reflectance index/i });
	await field(page, 'solarReflectance', 'value').fill('0.33');
	await cite(page, 'solarReflectance');
	await field(page, 'thermalEmittance', 'value').fill('0.90');
	await cite(page, 'thermalEmittance');
	await continueTo(page, /\/evaluation|\/inputs\//);
	await page.goto(page.url().replace(/\/(inputs|evaluation).*$/, '/check'));
	await settled(page);
	await page.getByRole('button', { name: 'Compute the result' }).click();
	await expect(page).toHaveURL(/\/result$/);
	await page.getByRole('link', { name: 'Put into a report' }).click();
	await settled(page);
	await page.getByRole('button', { name: 'Make a draft' }).click();
	await expect(page).toHaveURL(/\/reports\/[0-9a-f-]{36}$/);
	await settled(page);
	return page.url();
}
