import AxeBuilder from '@axe-core/playwright';
import { expect, test, type Page } from '@playwright/test';
import { prepareScreens, type Places } from '../../scripts/lib/prepare-screens.mjs';
import { screens } from '../../scripts/lib/screens.mjs';
import { signIns } from './support';
import { watch } from './watch';

/*
 * Every screen, narrow and wide, light and dark: no violation of WCAG 2.2 A and AA that a machine can find, no page
 * that scrolls sideways, no request that leaves the service, no breach of its policy, no error of a script.
 */

test.describe.configure({ mode: 'parallel' });

const tags = ['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa'];
/** What another scheme can change, the rest being the same page. */
const ofColour = ['color-contrast', 'link-in-text-block'];
const widths = [360, 1280];
const schemes = ['light', 'dark'] as const;

let places: Places;

test.beforeAll(async ({ browser, baseURL }) => {
	test.setTimeout(180_000);
	places = await prepareScreens(browser, {
		address: baseURL ?? '',
		mailReader: process.env.E2E_MAIL_READER ?? '',
		signIns: signIns.map((person) => ({ ...person, roles: [] }))
	});
});

async function violations(page: Page, scheme: (typeof schemes)[number]): Promise<string[]> {
	// Without frames of other origins nothing has to be gathered in a page of its own.
	const builder = new AxeBuilder({ page }).setLegacyMode(true);
	const { violations: found } = await (
		scheme === 'light' ? builder.withTags(tags) : builder.withRules(ofColour)
	).analyze();
	return found.flatMap(({ id, help, nodes }) =>
		nodes.map(({ target, failureSummary }) => {
			const why = (failureSummary ?? '').split('\n').slice(1).join(' ').replace(/\s+/g, ' ');
			return `${id}: ${help}\n    at ${target.join(' ')}\n    ${why}`;
		})
	);
}

/**
 * The bar at the foot of a narrow form covers what can be scrolled out from under it, which a machine takes for links
 * that are too small: it is looked at in its place below the text.
 */
async function layDownTheBar(page: Page): Promise<void> {
	await page.evaluate(() => {
		document.querySelector<HTMLElement>('aside.bar')?.style.setProperty('position', 'static');
	});
}

/** What reaches beyond the right edge of the window and is not within a part that scrolls by itself. */
async function beyondTheEdge(page: Page): Promise<string[]> {
	return page.evaluate(() => {
		const { clientWidth, scrollWidth } = document.documentElement;
		if (scrollWidth <= clientWidth) return [];
		const wide = [...document.body.querySelectorAll('*')].filter(
			(element) =>
				element.getBoundingClientRect().right > clientWidth + 1 && element.closest('.scroll-x') === null
		);
		const names = wide.slice(0, 5).map((element) => `${element.tagName.toLowerCase()}.${element.className}`);
		return [`the page is ${scrollWidth} px wide in a window of ${clientWidth} px: ${names.join(', ')}`];
	});
}

for (const screen of screens) {
	test(`${screen.name} is open to everybody and keeps to itself`, async ({ browser }) => {
		const context = await browser.newContext({
			baseURL: places.address,
			storageState: places.states[screen.who],
			reducedMotion: 'reduce'
		});
		const page = await context.newPage();
		const faults = watch(page, places.address, screen.status);
		await screen.open(page, places);
		await layDownTheBar(page);
		for (const width of widths) {
			await page.setViewportSize({ width, height: 800 });
			for (const colorScheme of schemes) {
				await page.emulateMedia({ colorScheme });
				for (const violation of await violations(page, colorScheme))
					faults.push(`${width} px, ${colorScheme}: ${violation}`);
			}
			for (const overflow of await beyondTheEdge(page)) faults.push(`${width} px: ${overflow}`);
		}
		await context.close();
		expect([...new Set(faults)].join('\n\n')).toBe('');
	});
}
