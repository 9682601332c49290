import { expect, test, type Page } from '@playwright/test';
import { demoPage, newcomer, settleIn } from './people';
import { settled } from './support';

/* Lists: what is in the address is what is shown, so that a search, a sort and a page can be linked to. */

const rows = (page: Page) => page.getByRole('main').locator('tbody').getByRole('row');
const titles = (page: Page) => page.getByRole('main').getByRole('rowheader').allInnerTexts();

test.describe('of a new organisation', () => {
	let page: Page;

	test.beforeAll(async ({ browser }) => {
		page = await (await browser.newContext()).newPage();
		await settleIn(page, newcomer(), 'Aldous Surveys');
	});
	test.afterAll(async () => {
		await page.context().close();
	});

	test('empty lists say what belongs there and lead to it', async () => {
		const ways: [string, string, RegExp][] = [
			['/dossiers', 'New dossier', /\/dossiers\/new$/],
			['/calculations', 'To the dossiers', /\/dossiers$/],
			['/reports', 'To the dossiers', /\/dossiers$/]
		];
		for (const [list, link, to] of ways) {
			await page.goto(list);
			await settled(page);
			await expect(page.getByRole('table')).toHaveCount(0);
			await expect(page.getByRole('search')).toHaveCount(0);
			await page.getByRole('main').getByRole('link', { name: link }).click();
			await expect(page).toHaveURL(to);
		}
	});

	test('27 dossiers: pages, sorting, search', async ({ baseURL }) => {
		test.setTimeout(120_000);
		for (let i = 1; i <= 27; i += 1) {
			const answer = await page.request.post('/dossiers/new', {
				headers: { origin: baseURL ?? '', accept: 'text/html' },
				form: {
					title: `Roof ${String(i).padStart(2, '0')}`,
					question: i === 13 ? 'Does the zinc bake?' : 'How hot?',
					client: i % 2 === 0 ? 'Even Homes' : 'Odd Homes'
				}
			});
			expect(answer.ok(), `dossier ${i}`).toBe(true);
		}
		await page.goto('/dossiers');
		await settled(page);
		await expect(rows(page)).toHaveCount(25);
		const foot = page.getByRole('navigation', { name: 'Pages of the list' });
		await expect(foot).toContainText('27 dossiers');
		await expect(foot).toContainText('page 1 of 2');
		expect((await titles(page))[0]).toBe('Roof 27');

		await page.getByRole('columnheader', { name: 'Title' }).getByRole('link').click();
		await expect(page).toHaveURL(/sort=title&order=asc/);
		await expect(page.getByRole('columnheader', { name: 'Title' })).toHaveAttribute('aria-sort', 'ascending');
		await expect(rows(page).first()).toContainText('Roof 01');
		await foot.getByRole('link', { name: 'Next page' }).click();
		await expect(page).toHaveURL(/sort=title&order=asc&page=2/);
		await expect(rows(page)).toHaveCount(2);
		expect(await titles(page)).toEqual(['Roof 26', 'Roof 27']);
		await page.reload();
		expect(await titles(page)).toEqual(['Roof 26', 'Roof 27']);
		await settled(page);
		await page.getByRole('columnheader', { name: 'Title' }).getByRole('link').click();
		await expect(page).toHaveURL(/sort=title&order=desc$/);
		await expect(rows(page).first()).toContainText('Roof 27');
		await page.goBack();
		await expect(rows(page)).toHaveCount(2);

		const search = page.getByRole('searchbox');
		await search.fill('zinc');
		await expect(page).toHaveURL(/\?q=zinc&sort=title&order=asc$/);
		await expect(rows(page)).toHaveCount(1);
		await expect(rows(page)).toContainText('Roof 13');
		await expect(foot).toContainText('1 of 27 dossiers');
		await expect(search).toBeFocused();
		await search.fill('even homes');
		await expect(foot).toContainText('13 of 27 dossiers');
		// Signs that a query language might take for its own are letters like any other.
		await search.fill('100 % _of_ it');
		await expect(foot).toContainText('0 of 27 dossiers');
		await expect(rows(page)).toContainText('Nothing is found by these words');
		await page.getByRole('link', { name: 'Show all' }).click();
		await expect(rows(page)).toHaveCount(25);
		await page.goto('/dossiers?page=99');
		await expect(rows(page)).toHaveCount(2);
	});
});

test('reports are narrowed to a state and sorted by number', async ({ browser }) => {
	const page = await demoPage(browser);
	await page.goto('/reports');
	await settled(page);
	await page.getByLabel('State').selectOption('issued');
	await expect(page).toHaveURL(/state=issued/);
	await expect(rows(page).first()).toBeVisible();
	const states = await page.locator('td[data-label="State"]').allInnerTexts();
	expect(new Set(states.map((state) => state.trim()))).toEqual(new Set(['issued']));
	await page.getByRole('columnheader', { name: 'Number' }).getByRole('link').click();
	await expect(page).toHaveURL(/state=issued&sort=number&order=asc/);
	const numbers = await page.locator('tbody td:first-child').allInnerTexts();
	expect(numbers).toEqual([...numbers].sort());
	await page.getByRole('searchbox').fill('marrow coast');
	await expect(page).toHaveURL(/q=marrow(\+|%20)coast/);
	await expect(rows(page).first()).toContainText('Marrow Coast');
	await page.context().close();
});

test('calculations are found by their dossier and by their method', async ({ browser }) => {
	const page = await demoPage(browser);
	await page.goto('/calculations');
	await settled(page);
	const search = page.getByRole('searchbox');
	// By its whole name: other tests work on copies of it.
	const patch = rows(page).filter({
		has: page.getByRole('link', { name: 'Dark patch, half filled in', exact: true })
	});
	await search.fill('landing site');
	await expect(patch).toHaveCount(1);
	await expect(rows(page).filter({ hasText: 'Coated sheet' })).toHaveCount(0);
	await search.fill('effective temperature');
	await expect(patch).toHaveCount(1);
	await expect(rows(page).filter({ hasText: 'Sunlit side, local balance' })).toHaveCount(0);
	await page.context().close();
});
