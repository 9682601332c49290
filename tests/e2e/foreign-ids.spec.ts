import { expect, test, type APIRequestContext, type Page } from '@playwright/test';
import { smallPng } from './files';
import { demoPage } from './people';
import { settled } from './support';

/* What belongs to another organisation answers as if it were not there, by whatever way it is asked for. */

interface Ids {
	dossier: string;
	calculation: string;
	run: string;
	evidence: string;
	report: string;
	preview: string;
}

const idIn = (address: string | null): string => /[0-9a-f]{8}-[0-9a-f-]{27}/.exec(address ?? '')?.[0] ?? '';

async function first(page: Page, list: string, link: string): Promise<string> {
	await page.goto(`${list}?q=${encodeURIComponent(link)}`);
	return idIn(await page.getByRole('link', { name: link }).first().getAttribute('href'));
}

async function consultantsIds(page: Page): Promise<Ids> {
	const dossier = await first(page, '/dossiers', 'Roof surfaces, Marrow Coast');
	const calculation = await first(page, '/calculations', 'Coated sheet, aged three years');
	const report = await first(page, '/reports', 'Coated roof sheet');
	await page.goto(`/calculations/${calculation}/result`);
	const record = await page.getByRole('link', { name: 'Download the record' }).getAttribute('href');
	const run = idIn((record ?? '').split('/runs/')[1] ?? '');

	await page.goto(`/dossiers/${dossier}`);
	await settled(page);
	const name = `survey-${Date.now()}.png`;
	await page.locator('#file').setInputFiles({ name, mimeType: 'image/png', buffer: smallPng });
	await page.getByRole('button', { name: 'Add the file' }).click();
	const file = page.getByRole('link', { name });
	await expect(file).toBeVisible();
	const evidence = idIn(await file.getAttribute('href'));

	await page.goto(`/dossiers/${dossier}/reports/new`);
	await settled(page);
	await page.getByRole('radio').first().check();
	await page.getByRole('button', { name: 'Make a draft' }).click();
	await expect(page).toHaveURL(/\/reports\/[0-9a-f-]{36}$/);
	const draft = idIn(page.url());
	await settled(page);
	await page.getByRole('button', { name: 'Save and preview' }).click();
	await expect(page.getByRole('link', { name: 'Open the preview' })).toBeVisible({ timeout: 60_000 });
	const preview = idIn(page.url().split('/previews/')[1] ?? '');
	const ids = { dossier, calculation, run, evidence, report: draft, preview };
	for (const [what, id] of Object.entries({ ...ids, issued: report })) expect(id, what).toHaveLength(36);
	return ids;
}

/** Every address that a browser asks for, by the ids in it. */
function addresses(ids: Ids): string[] {
	const calculation = `/calculations/${ids.calculation}`;
	const report = `/reports/${ids.report}`;
	return [
		`/dossiers/${ids.dossier}`,
		`/dossiers/${ids.dossier}/edit`,
		`/dossiers/${ids.dossier}/calculations/new`,
		`/dossiers/${ids.dossier}/reports/new`,
		`${calculation}/question`,
		`${calculation}/method`,
		`${calculation}/inputs/surface`,
		`${calculation}/compare`,
		`${calculation}/evaluation`,
		`${calculation}/check`,
		`${calculation}/history`,
		`${calculation}/result`,
		`${calculation}/runs/${ids.run}/record.json`,
		`/api/runs/${ids.run}`,
		report,
		`${report}/issue`,
		`${report}/previews/${ids.preview}`,
		`${report}/previews/${ids.preview}/file.pdf`,
		`/api/previews/${ids.preview}`,
		`/evidence/${ids.evidence}`
	];
}

async function statuses(request: APIRequestContext, paths: string[]): Promise<Record<string, number>> {
	const found: Record<string, number> = {};
	for (const path of paths) found[path] = (await request.get(path)).status();
	return found;
}

test('ids of another organisation answer 404, to reading and to writing', async ({ browser, baseURL }) => {
	test.setTimeout(180_000);
	const ines = await demoPage(browser);
	const ids = await consultantsIds(ines);
	const paths = addresses(ids);
	expect(await statuses(ines.request, paths), 'for their own organisation').toEqual(
		Object.fromEntries(paths.map((path) => [path, 200]))
	);

	const oda = await demoPage(browser, 'The Ferrow Courier');
	const own = await first(oda, '/calculations', 'The 38 degC of the notice');
	const asked = [...paths, `/calculations/${own}/runs/${ids.run}/record.json`];
	expect(await statuses(oda.request, asked), 'for another organisation').toEqual(
		Object.fromEntries(asked.map((path) => [path, 404]))
	);

	const headers = { origin: baseURL ?? '' };
	const posts: [string, Record<string, string>][] = [
		[`/dossiers/${ids.dossier}?/delete`, {}],
		[`/dossiers/${ids.dossier}?/deleteFile`, { id: ids.evidence }],
		[`/calculations/${ids.calculation}/history?/delete`, {}],
		[`/calculations/${ids.calculation}/history?/duplicate`, {}],
		[`/calculations/${ids.calculation}/check`, {}],
		[`/reports/${ids.report}?/delete`, {}],
		[`/reports/${ids.report}/issue`, {}]
	];
	for (const [path, form] of posts) {
		const answer = await oda.request.post(path, { form, headers, maxRedirects: 0 });
		expect(answer.status(), `POST ${path}`).toBe(404);
	}
	const draft = await oda.request.put(`/api/calculations/${ids.calculation}/draft`, {
		headers,
		data: { draft: {}, baseVersion: 1 }
	});
	expect([400, 404], 'PUT of a draft').toContain(draft.status());
	expect(await statuses(ines.request, paths), 'still there').toEqual(
		Object.fromEntries(paths.map((path) => [path, 200]))
	);

	await ines.goto(`/reports/${ids.report}`);
	await settled(ines);
	await ines.getByRole('button', { name: 'Delete this draft' }).click();
	await expect(ines.getByRole('status').filter({ hasText: 'was deleted' })).toBeVisible();
	await ines.context().close();
	await oda.context().close();
});
