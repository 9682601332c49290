import { expect, test, type Page } from '@playwright/test';
import { smallPng } from './files';
import { demoPage } from './people';
import { calculationOf, field, runningAnswer, saved, startCalculation } from './steps';
import { newDossier, settled } from './support';

/* Copies, deletions that can be undone, and versions brought back. */

let page: Page;
let dossier: string;
let calculation: string;

test.beforeAll(async ({ browser }) => {
	page = await demoPage(browser);
	dossier = await newDossier(page, `Undone ${Date.now()}`, 'What can be brought back?', 'Weir Lane');
	calculation = await startCalculation(page, dossier, { title: 'Tile', method: /solar reflectance index/i });
	await field(page, 'solarReflectance', 'value').fill('0.33');
	await field(page, 'thermalEmittance', 'value').fill('0.90');
	await expect(runningAnswer(page)).toContainText('35.79');
	await saved(page);
	await page.goto(`${calculation}/check`);
	await settled(page);
	await page.getByRole('button', { name: 'Compute the result' }).click();
	await expect(page).toHaveURL(/\/result$/);
	await expect(page.getByRole('heading', { name: 'Working' })).toBeVisible({ timeout: 60_000 });
});
test.afterAll(async () => {
	await page.context().close();
});

/** The notice after a deletion, with its way back. */
async function undo(text: string): Promise<void> {
	const notice = page.getByRole('status').filter({ hasText: text });
	await expect(notice).toBeVisible();
	await settled(page);
	await notice.getByRole('button', { name: 'Undo' }).click();
	await expect(notice).toBeHidden();
}

test('a calculation is copied; the copy is deleted and brought back', async () => {
	await page.goto(`${calculation}/history`);
	await settled(page);
	await page.getByRole('button', { name: 'Duplicate this calculation' }).click();
	await expect(page).toHaveURL(/\/question$/);
	const copy = calculationOf(page);
	expect(copy).not.toBe(calculation);
	const title = await page.getByLabel('Title of this calculation').inputValue();
	expect(title).toContain('Tile');
	await page.goto(`${copy}/inputs/surface`);
	await expect(field(page, 'solarReflectance', 'value')).toHaveValue('0.33');

	await page.goto(`${copy}/history`);
	await settled(page);
	await page.getByRole('button', { name: 'Delete it' }).click();
	await expect(page).toHaveURL(/\/dossiers\//);
	const link = page.getByRole('table', { name: 'Calculations' }).getByRole('link', { name: title });
	await expect(link).toBeHidden();
	expect((await page.request.get(`${copy}/check`)).status()).toBe(404);
	await undo('was deleted');
	await expect(link).toBeVisible();
	expect((await page.request.get(`${copy}/check`)).status()).toBe(200);
});

test('an earlier version is brought back, and becomes the newest', async () => {
	const address = await startCalculation(page, dossier, { title: 'Versions', method: /solar reflectance/i });
	await field(page, 'solarReflectance', 'value').fill('0.25');
	await saved(page);
	await page.goto(`${address}/history`);
	await settled(page);
	const versions = page.getByRole('listitem').filter({ hasText: /^\s*Version \d/ });
	const before = await versions.count();
	expect(before).toBeGreaterThan(1);
	await page.getByRole('button', { name: 'Bring back version 1' }).click();
	await expect(page).toHaveURL(/\/check$/);
	await expect(page.getByRole('main')).toContainText('No method has been chosen yet');
	await page.goto(`${address}/history`);
	await settled(page);
	const newest = versions.first();
	await expect(newest).toContainText('as it stands');
	const overwritten = versions.nth(1).getByRole('button', { name: /^Bring back/ });
	await overwritten.click();
	await expect(page).toHaveURL(/\/check$/);
	await expect(page.getByRole('main')).toContainText('0.25');
});

test('a draft of a report is deleted and brought back', async () => {
	await page.goto(`${dossier}/reports/new`);
	await settled(page);
	await page.getByRole('button', { name: 'Make a draft' }).click();
	await expect(page).toHaveURL(/\/reports\/[0-9a-f-]{36}$/);
	const draft = new URL(page.url()).pathname;
	await settled(page);
	await page.getByLabel('Commentary').fill('Pale tiles stay cooler.');
	await page.getByRole('button', { name: 'Save', exact: true }).click();
	await expect(page.getByRole('status').filter({ hasText: 'Saved' })).toBeVisible();
	await page.getByRole('button', { name: 'Delete this draft' }).click();
	await expect(page).toHaveURL(/\/dossiers\//);
	expect((await page.request.get(draft)).status()).toBe(404);
	await undo('was deleted');
	await expect(page).toHaveURL(new RegExp(`${draft}$`));
	await expect(page.getByLabel('Commentary')).toHaveValue('Pale tiles stay cooler.');
});

test('a file of evidence is deleted and brought back', async () => {
	await page.goto(dossier);
	await settled(page);
	const name = 'roof-survey.png';
	await page.locator('#file').setInputFiles({ name, mimeType: 'image/png', buffer: smallPng });
	await page.getByRole('button', { name: 'Add the file' }).click();
	const file = page.getByRole('link', { name, exact: true });
	await expect(file).toBeVisible();
	const address = (await file.getAttribute('href')) ?? '';
	await page.getByRole('button', { name: `Delete the file ${name}` }).click();
	await expect(file).toBeHidden();
	expect((await page.request.get(address)).status()).toBe(404);
	await undo('was deleted');
	await expect(file).toBeVisible();
	const back = await page.request.get(address);
	expect((await back.body()).equals(smallPng)).toBe(true);
	expect(back.headers()['content-disposition']).toContain('attachment');
});

test('a dossier is deleted with all that is in it, and brought back with it', async () => {
	await page.goto(dossier);
	await settled(page);
	const title = await page.getByRole('heading', { level: 1 }).innerText();
	await page.getByRole('button', { name: 'Delete this dossier' }).click();
	await expect(page).toHaveURL(/\/dossiers\?deleted=/);
	const row = page.getByRole('rowheader').getByRole('link', { name: title });
	await expect(row).toBeHidden();
	expect((await page.request.get(`${calculation}/check`)).status()).toBe(404);
	await undo('was deleted with everything in it');
	expect((await page.request.get(`${calculation}/check`)).status()).toBe(200);
	await page.goto('/dossiers');
	await expect(row).toBeVisible();
});
