import { expect, test } from '@playwright/test';
import { demoPage } from './people';
import { field } from './steps';
import { demoPerson, newDossier } from './support';

/* The way from signing in to a computed result, without a single script running. */

test.use({ javaScriptEnabled: false });

test('from signing in to the result without script', async ({ page }) => {
	test.setTimeout(150_000);
	const person = demoPerson('The Ferrow Courier');
	await page.goto('/sign-in');
	await page.getByLabel('E-mail').fill(person.email);
	await page.getByLabel('Password', { exact: true }).fill('not the password at all');
	await page.getByRole('main').getByRole('button', { name: 'Sign in' }).click();
	await expect(page.getByRole('alert')).toContainText('do not belong together');
	await expect(page.getByLabel('E-mail')).toHaveValue(person.email);
	await page.getByLabel('Password', { exact: true }).fill(person.password);
	await page.getByRole('main').getByRole('button', { name: 'Sign in' }).click();
	await expect(page).toHaveURL(/\/dossiers$/);

	const dossier = await newDossier(page, 'Orrin by hand', 'Is Orrin a mild 38 degC?', 'Science desk');
	await page.getByRole('link', { name: 'New calculation' }).click();
	await page.getByRole('radio', { name: 'Find a value' }).check();
	await page.getByRole('button', { name: 'Continue to method' }).click();
	await expect(page.getByRole('alert')).toContainText('Title');
	await page.getByLabel('Title of this calculation').fill('Orrin at closest approach');
	await page.getByRole('button', { name: 'Continue to method' }).click();
	await expect(page).toHaveURL(/\/method$/);
	await page.getByRole('radio', { name: /^Sunlit side/ }).check();
	await page.getByRole('button', { name: /^Continue/ }).click();
	await expect(page).toHaveURL(/\/inputs\/light$/);

	await field(page, 'irradiance', 'value').fill('531,6');
	await field(page, 'bondAlbedo', 'value').fill('0,05');
	await field(page, 'emissivity', 'value').fill('nought point nine');
	await field(page, 'bondAlbedo', 'spread').selectOption('normal');
	const albedo = page.getByRole('group', { name: /reflected to space/ });
	await albedo.getByRole('button', { name: 'Show its fields' }).click();
	await expect(field(page, 'bondAlbedo', 'p.standardUncertainty')).toBeVisible();
	await expect(field(page, 'bondAlbedo', 'value')).toHaveValue('0,05');
	await field(page, 'bondAlbedo', 'p.standardUncertainty').fill('0,01');

	await page.getByRole('button', { name: /^Continue/ }).click();
	await expect(page).toHaveURL(/\/inputs\/light/);
	await expect(page).toHaveTitle(/^1 to mend: /);
	const summary = page.getByRole('alert');
	const beside = page.locator('[id="in.emissivity.value-error"]');
	await expect(beside).toBeVisible();
	await expect(summary.getByRole('link')).toHaveText((await beside.textContent()) ?? '');
	await expect(summary.getByRole('link')).toHaveAttribute('href', '#in.emissivity.value');
	await expect(field(page, 'emissivity', 'value')).toHaveValue('nought point nine');
	await expect(field(page, 'irradiance', 'value')).toHaveValue('531,6');
	await expect(field(page, 'bondAlbedo', 'p.standardUncertainty')).toHaveValue('0,01');

	await field(page, 'emissivity', 'value').fill('0,95');
	// The key that sends a form goes on to the next step, not to the first button on the way.
	await field(page, 'emissivity', 'value').press('Enter');
	await expect(page).toHaveURL(/\/inputs\/night$/);
	await page.getByRole('button', { name: /^Continue/ }).click();
	await expect(page).toHaveURL(/\/evaluation$/);
	await page.getByRole('button', { name: /^Continue/ }).click();
	await expect(page).toHaveURL(/\/check$/);
	await expect(page.getByRole('main')).toContainText('531.6');
	await page.getByRole('button', { name: 'Compute the result' }).click();
	await expect(page).toHaveURL(/\/result$/);
	await expect(async () => {
		const again = page.getByRole('link', { name: 'Look again' });
		if (await again.isVisible()) await again.click();
		// Own computation from the published law, checked in tests/published: -24.2 degC and 38.0 degC.
		await expect(page.getByRole('main')).toContainText('−24.2', { timeout: 1000 });
	}).toPass({ timeout: 60_000 });
	await expect(page.getByRole('main')).toContainText('38.0');

	await page.goto(dossier);
	await page.getByRole('button', { name: 'Delete this dossier' }).click();
	await expect(page.getByRole('status').first()).toContainText('was deleted');
	await page.getByRole('button', { name: 'Undo' }).click();
	await expect(page).toHaveURL(/\/dossiers/);
	await page.goto(dossier);
	await expect(page.getByRole('heading', { level: 1 })).toHaveText('Orrin by hand');
});

test('a report is verified without script', async ({ page, browser, baseURL }) => {
	const member = await demoPage(browser, 'Tallis Brook Consulting', { javaScriptEnabled: false });
	await member.goto('/reports?state=issued');
	const report = await member.getByRole('rowheader').getByRole('link').first().getAttribute('href');
	const answer = await member.request.get(`${report ?? ''}/file.pdf`);
	expect(answer.status()).toBe(200);
	const buffer = await answer.body();
	await member.context().close();

	await page.goto(`${baseURL ?? ''}/verify`);
	await page
		.locator('input[type="file"]')
		.setInputFiles({ name: 'report.pdf', mimeType: 'application/pdf', buffer });
	await page.getByRole('button', { name: 'Check this file' }).click();
	await expect(page.getByRole('heading', { level: 1 })).toHaveText(/genuine/i);
	await expect(page.getByRole('main')).toContainText('Recomputed');
});
