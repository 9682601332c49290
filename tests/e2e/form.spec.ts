import { expect, test, type Page } from '@playwright/test';
import { smallPdf, smallPng } from './files';
import { demoPage } from './people';
import { calculationOf, continueTo, field, runningAnswer, saved, startCalculation } from './steps';
import { newDossier, settled } from './support';

/* The guided form as somebody fills it: it answers while they type, and loses nothing. */

let page: Page;
let dossier: string;

test.beforeAll(async ({ browser }) => {
	page = await demoPage(browser);
	dossier = await newDossier(page, `Roofs ${Date.now()}`, 'How hot do these roofs get?', 'Weir Lane');
});
test.afterAll(async () => {
	await page.context().close();
});

/** A clay tile: reflectance 0.33, emittance 0.90. */
async function tile(title: string): Promise<string> {
	const address = await startCalculation(page, dossier, { title, method: /solar reflectance index/i });
	await field(page, 'solarReflectance', 'value').fill('0.33');
	await field(page, 'thermalEmittance', 'value').fill('0.90');
	await expect(runningAnswer(page)).toContainText('35.79');
	await saved(page);
	return address;
}

test('it answers while typing, marks what it cannot read, and keeps it as typed', async () => {
	await startCalculation(page, dossier, { title: 'Live answer', method: /solar reflectance index/i });
	const answer = runningAnswer(page);
	await expect(answer).toContainText('2 answers missing or unreadable');
	await field(page, 'solarReflectance', 'value').fill('0,33');
	await field(page, 'thermalEmittance', 'value').fill('1,2');
	await expect(page.locator('[id="in.thermalEmittance.value-error"]')).toBeVisible();
	await expect(answer).toContainText('one answer missing or unreadable');
	await field(page, 'thermalEmittance', 'value').fill('0.9');
	await expect(page.locator('[id="in.thermalEmittance.value-error"]')).toBeHidden();
	// LBNL's table, as printed in The Engineering Guide to LEED - New Construction, table 2.7.3: index 36.
	await expect(answer).toContainText('35.79');
	await field(page, 'solarReflectance', 'spread').selectOption('rectangular');
	await field(page, 'solarReflectance', 'p.halfWidth').fill('0,02');
	await expect(answer).toContainText('standard uncertainty');
	await expect(answer).toContainText('95 % interval', { useInnerText: true });
	await expect(field(page, 'solarReflectance', 'value')).toHaveValue('0,33');
});

test('what was typed is saved without a button, and is there after the page is loaded anew', async () => {
	await tile('Saved by itself');
	await field(page, 'solarReflectance', 'spread').selectOption('normal');
	await field(page, 'solarReflectance', 'p.standardUncertainty').fill('0,011');
	await saved(page);
	await page.reload();
	await settled(page);
	await expect(field(page, 'solarReflectance', 'spread')).toHaveValue('normal');
	await expect(field(page, 'solarReflectance', 'p.standardUncertainty')).toHaveValue('0,011');
	await expect(field(page, 'thermalEmittance', 'value')).toHaveValue('0.90');
});

test('a second tab that is behind is told so, and keeps what was typed in it', async () => {
	const address = await tile('Two tabs');
	const other = await page.context().newPage();
	await other.goto(`${address}/inputs/surface`);
	await settled(other);
	await field(page, 'solarReflectance', 'value').fill('0.40');
	await saved(page);

	await field(other, 'thermalEmittance', 'value').fill('0.85');
	const told = other.getByRole('status').filter({ hasText: 'saved elsewhere' });
	await expect(told).toBeVisible();
	await expect(field(other, 'thermalEmittance', 'value')).toHaveValue('0.85');
	// Going on regardless overwrites nothing and still loses nothing.
	await other.getByRole('button', { name: /^Continue/ }).click();
	await expect(other.getByRole('alert')).toContainText('saved elsewhere');
	await expect(field(other, 'thermalEmittance', 'value')).toHaveValue('0.85');
	await page.reload();
	await settled(page);
	await expect(field(page, 'solarReflectance', 'value')).toHaveValue('0.40');
	await expect(field(page, 'thermalEmittance', 'value')).toHaveValue('0.90');

	other.on('dialog', (dialog) => void dialog.accept());
	await told.getByRole('button', { name: 'Reload' }).click();
	await expect(field(other, 'solarReflectance', 'value')).toHaveValue('0.40');
	await other.close();
});

test('customary units give the same answer as SI', async () => {
	const address = await tile('Customary units');
	const metric = await runningAnswer(page).locator('.value').innerText();
	await page.goto(`${address}/inputs/surroundings`);
	await settled(page);
	// NIST Special Publication 811, appendix B.8: 1 Btu(IT)/(h ft2 degF) = 5.678 263 W/(m2 K), and
	// 1 Btu(IT)/(h ft2) = 3.154 591 W/m2. 310 K is 98.33 degF, 300 K is 80.33 degF.
	const customary: [string, string, string][] = [
		['convectionCoefficient', (12 / 5.678263).toFixed(6), 'Btu/(h ft^2 degF)'],
		['irradiance', (1000 / 3.154591).toFixed(4), 'Btu/(h ft^2)'],
		['airTemperature', '98.33', 'degF'],
		['skyTemperature', '80.33', 'degF']
	];
	for (const [input, value, unit] of customary) {
		await field(page, input, 'unit').selectOption(unit);
		await field(page, input, 'value').fill(value);
	}
	await saved(page);
	const answer = async (): Promise<number> =>
		Number((await runningAnswer(page).locator('.text-answer').innerText()).replace('−', '-'));
	await expect(async () => {
		expect(Math.abs((await answer()) - Number(metric.split(/\s/)[0]))).toBeLessThan(0.001);
	}).toPass();
	await page.goto(`${address}/evaluation`);
	await settled(page);
	await page.getByLabel('Show temperatures in').selectOption('degF');
	await expect(runningAnswer(page)).toContainText('°F');
});

test('evidence is added in a step; a text file that calls itself a PDF is not', async () => {
	await tile('With evidence');
	const block = page.getByRole('group', { name: /sunlight does the surface reflect/ });
	await block.locator('summary').click();
	const upload = (name: string, mimeType: string, buffer: Buffer) =>
		field(page, 'solarReflectance', 'file').setInputFiles({ name, mimeType, buffer });
	await field(page, 'solarReflectance', 'value').fill('0.34');
	await upload('sheet.pdf', 'application/pdf', Buffer.from('Solar reflectance 0.34, by hand.'));
	await page.getByRole('button', { name: /^Continue/ }).click();
	await expect(page.getByRole('alert')).toContainText('neither a PDF nor a PNG');
	await expect(field(page, 'solarReflectance', 'value')).toHaveValue('0.34');

	await upload('tile-sheet.pdf', 'application/pdf', smallPdf());
	await continueTo(page, /\/inputs\/surroundings$/);
	await page.goBack();
	await settled(page);
	await expect(block).toContainText('Source: tile-sheet.pdf');
	await page
		.getByRole('group', { name: /radiate heat/ })
		.locator('summary')
		.click();
	await field(page, 'thermalEmittance', 'file').setInputFiles({
		name: 'capture.png',
		mimeType: 'image/png',
		buffer: smallPng
	});
	await continueTo(page, /\/inputs\/surroundings$/);
	await page.goto(dossier);
	for (const name of ['tile-sheet.pdf', 'capture.png'])
		await expect(page.getByRole('link', { name, exact: true })).toBeVisible();
});

test('one step by the keyboard alone', async () => {
	await startCalculation(page, dossier, { title: 'By keyboard', method: /solar reflectance index/i });
	await page.keyboard.press('Tab');
	const skip = page.getByRole('link', { name: 'Skip to the content' });
	await expect(skip).toBeFocused();
	await expect(skip).toBeInViewport();
	await page.keyboard.press('Enter');
	await expect(page.locator('main')).toBeFocused();
	const tabTo = async (selector: string): Promise<void> => {
		for (let i = 0; i < 40; i += 1) {
			await page.keyboard.press('Tab');
			if (await page.locator(selector).evaluate((element) => element === document.activeElement)) return;
		}
		throw new Error(`The Tab key never came to ${selector}.`);
	};
	await tabTo('[id="in.solarReflectance.value"]');
	await page.keyboard.type('0.33');
	await tabTo('[id="in.solarReflectance.spread"]');
	// The next kind of the list after "exact".
	await page.keyboard.press('ArrowDown');
	await expect(field(page, 'solarReflectance', 'spread')).toHaveValue('normal');
	await page.keyboard.press('Shift+Tab');
	await page.keyboard.type('0.01');
	await tabTo('[id="in.thermalEmittance.value"]');
	await page.keyboard.type('0.9');
	await page.keyboard.press('Enter');
	await expect(page).toHaveURL(/\/inputs\/surroundings$/);
	await expect(runningAnswer(page)).toContainText('standard uncertainty');
});

test('a long run shows its progress and ends', async () => {
	test.setTimeout(180_000);
	const address = await tile('Two million trials');
	await field(page, 'solarReflectance', 'spread').selectOption('normal');
	await field(page, 'solarReflectance', 'p.standardUncertainty').fill('0.01');
	await saved(page);
	await page.goto(`${address}/evaluation`);
	await settled(page);
	await page.getByLabel('Trials').fill('2 000 000');
	await continueTo(page, /\/check$/);
	await expect(page.getByRole('main')).toContainText('Runs in the background');
	await page.getByRole('button', { name: 'Compute the result' }).click();
	await expect(page).toHaveURL(/\/result$/);
	await expect(page.getByRole('heading', { level: 1, name: 'Computing…' })).toBeVisible();
	await expect(page.getByRole('status').getByRole('progressbar')).toBeVisible();
	await expect(page.getByRole('heading', { name: 'Working' })).toBeVisible({ timeout: 120_000 });
	await expect(page.locator('aside')).toContainText('2 000 000 trials', { useInnerText: true });
	expect(calculationOf(page)).toBe(address);
});
