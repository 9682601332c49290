import { settled, visit } from './prepare-screens.mjs';

/*
 * Every screen of the application, once. The pictures and the tests that visit all screens read this list: a new page
 * is added here and is then looked at, tested for access, and watched for requests that leave the machine.
 */

/** @typedef {import('@playwright/test').Page} Page */
/** @typedef {import('./prepare-screens.mjs').Places} Places */

/**
 * @typedef {object} Screen
 * @property {string} name also the picture's file name
 * @property {import('./prepare-screens.mjs').Who} who
 * @property {(page: Page, places: Places) => Promise<void>} open
 * @property {number} [status] of an error page's answer
 */

/** @param {string} path @returns {Screen['open']} */
const at = (path) => (page) => visit(page, path);

/** @param {(places: Places) => string} path @returns {Screen['open']} */
const of = (path) => (page, places) => visit(page, path(places));

/** @param {Page} page @param {string} button */
async function press(page, button) {
	await page.getByRole('main').getByRole('button', { name: button }).first().click();
	await settled(page);
}

/** @param {Page} page */
async function faultsShown(page) {
	await page.getByRole('alert').first().waitFor();
}

/** @param {Page} page @param {string} name @param {Buffer} buffer */
async function check(page, name, buffer) {
	await visit(page, '/verify');
	await page.locator('input[type="file"]').setInputFiles({ name, mimeType: 'application/pdf', buffer });
	await press(page, 'Check this file');
}

/** One bit of a page's content turned over. @param {Buffer} pdf */
export function altered(pdf) {
	const copy = Buffer.from(pdf);
	const place = copy.indexOf('stream', 2000) + 40;
	copy[place] = (copy[place] ?? 0) ^ 1;
	return copy;
}

/** Something appended behind the signed bytes. @param {Buffer} pdf */
export function extended(pdf) {
	return Buffer.concat([pdf, Buffer.from('% an addition\n', 'latin1')]);
}

/** @type {readonly Screen[]} */
const publicScreens = [
	{ name: 'start', who: 'nobody', open: at('/') },
	{ name: 'methods', who: 'nobody', open: at('/methods') },
	{
		name: 'method-effective-temperature',
		who: 'nobody',
		open: at('/methods/effective-temperature')
	},
	{ name: 'method-sunlit-equilibrium', who: 'nobody', open: at('/methods/sunlit-equilibrium') },
	{ name: 'method-solar-reflectance-index', who: 'nobody', open: at('/methods/solar-reflectance-index') },
	{ name: 'verify', who: 'nobody', open: at('/verify') },
	{
		name: 'verify-faults',
		who: 'nobody',
		open: async (page) => {
			await visit(page, '/verify');
			await page.getByLabel('Code from page one').fill('8KQ2');
			await press(page, 'Look it up');
			await faultsShown(page);
		}
	},
	{ name: 'verify-code', who: 'nobody', open: of(({ code }) => `/verify/${code}`) },
	{ name: 'verify-genuine', who: 'nobody', open: (page, { pdf }) => check(page, 'report.pdf', pdf) },
	{
		name: 'verify-altered',
		who: 'nobody',
		open: (page, { pdf }) => check(page, 'altered.pdf', altered(pdf))
	},
	{
		name: 'verify-extended',
		who: 'nobody',
		open: (page, { pdf }) => check(page, 'extended.pdf', extended(pdf))
	},
	{
		name: 'verify-no-report',
		who: 'nobody',
		open: (page) => check(page, 'letter.pdf', Buffer.from('Dear reader, this is no PDF at all.'))
	},
	{ name: 'not-found', who: 'nobody', open: at('/no-such-page'), status: 404 }
];

/** @type {readonly Screen[]} */
const accountScreens = [
	{ name: 'sign-in', who: 'nobody', open: at('/sign-in') },
	{
		name: 'sign-in-faults',
		who: 'nobody',
		open: async (page) => {
			await visit(page, '/sign-in');
			await press(page, 'Sign in');
			await faultsShown(page);
		}
	},
	{ name: 'sign-up', who: 'nobody', open: at('/sign-up') },
	{
		name: 'sign-up-faults',
		who: 'nobody',
		open: async (page) => {
			await visit(page, '/sign-up');
			await page.getByLabel('E-mail address').fill('runa at example');
			await page.getByLabel('Password', { exact: true }).fill('short');
			await press(page, 'Make the account');
			await faultsShown(page);
		}
	},
	{ name: 'sign-up-sent', who: 'nobody', open: at('/sign-up/confirm') },
	{ name: 'confirm', who: 'nobody', open: of(({ confirmLink }) => confirmLink) },
	{ name: 'confirm-dead-link', who: 'nobody', open: at(`/confirm/${'x'.repeat(43)}`) },
	{ name: 'reset', who: 'nobody', open: at('/reset') },
	{
		name: 'reset-sent',
		who: 'nobody',
		open: async (page) => {
			await visit(page, '/reset');
			await page.getByLabel('E-mail address').fill('nobody.here@example.org');
			await press(page, 'Send the link');
			await page.getByRole('heading', { name: 'Look into your mailbox' }).waitFor();
		}
	},
	{ name: 'reset-new-password', who: 'nobody', open: of(({ resetLink }) => resetLink) },
	{ name: 'reset-dead-link', who: 'nobody', open: at(`/reset/${'x'.repeat(43)}`) },
	{ name: 'account', who: 'consultant', open: at('/account') },
	{ name: 'organisation', who: 'consultant', open: at('/organisation') },
	{ name: 'billing', who: 'consultant', open: at('/billing') },
	{ name: 'billing-without-plan', who: 'founder', open: at('/billing') },
	{ name: 'billing-review', who: 'founder', open: at('/billing/review?seats=3&interval=year') },
	{ name: 'billing-review-fault', who: 'founder', open: at('/billing/review?seats=none&interval=year') },
	{ name: 'billing-seats', who: 'consultant', open: at('/billing/seats?seats=9') },
	{ name: 'organisation-new', who: 'newcomer', open: at('/organisation/new') },
	{
		name: 'organisation-new-faults',
		who: 'newcomer',
		open: async (page) => {
			await visit(page, '/organisation/new');
			await press(page, 'Make the organisation');
			await faultsShown(page);
		}
	}
];

/** @type {readonly Screen[]} */
const workScreens = [
	{ name: 'dossiers', who: 'consultant', open: at('/dossiers') },
	{ name: 'dossiers-none', who: 'founder', open: at('/dossiers') },
	{ name: 'dossiers-nothing-found', who: 'consultant', open: at('/dossiers?q=zeppelin') },
	{ name: 'dossier-new', who: 'consultant', open: at('/dossiers/new') },
	{
		name: 'dossier-new-faults',
		who: 'consultant',
		open: async (page) => {
			await visit(page, '/dossiers/new');
			await page.getByRole('main').getByRole('button').first().click();
			await faultsShown(page);
		}
	},
	{ name: 'dossier', who: 'consultant', open: of(({ dossier }) => dossier) },
	{ name: 'dossier-edit', who: 'consultant', open: of(({ dossier }) => `${dossier}/edit`) },
	{
		name: 'dossier-not-found',
		who: 'consultant',
		open: at(`/dossiers/${'0'.repeat(8)}-0000-4000-8000-${'0'.repeat(12)}`),
		status: 404
	},
	{ name: 'calculations', who: 'consultant', open: at('/calculations') },
	{ name: 'calculations-none', who: 'founder', open: at('/calculations') },
	{ name: 'calculation-new', who: 'consultant', open: of(({ dossier }) => `${dossier}/calculations/new`) },
	{ name: 'form-question', who: 'consultant', open: of(({ value }) => `${value}/question`) },
	{ name: 'form-method', who: 'consultant', open: of(({ value }) => `${value}/method`) },
	{ name: 'form-light', who: 'consultant', open: of(({ value }) => `${value}/inputs/light`) },
	{ name: 'form-surface', who: 'consultant', open: of(({ limit }) => `${limit}/inputs/surface`) },
	{ name: 'form-surroundings', who: 'consultant', open: of(({ limit }) => `${limit}/inputs/surroundings`) },
	{
		name: 'form-source-open',
		who: 'consultant',
		open: async (page, { value }) => {
			await visit(page, `${value}/inputs/light`);
			const closed = page.getByRole('main').locator('details:not([open]) > summary');
			while ((await closed.count()) > 0) await closed.first().click();
		}
	},
	{
		name: 'form-faults',
		who: 'consultant',
		open: async (page, { unfinished }) => {
			await visit(page, `${unfinished}/inputs/light`);
			await page.locator('[id="in.bondAlbedo.value"]').fill('7');
			await page.getByRole('button', { name: /^Continue/ }).click();
			await faultsShown(page);
		}
	},
	{ name: 'form-claim', who: 'reporter', open: of(({ claim }) => `${claim}/compare`) },
	{ name: 'form-limit', who: 'consultant', open: of(({ limit }) => `${limit}/compare`) },
	{ name: 'form-evaluation', who: 'consultant', open: of(({ value }) => `${value}/evaluation`) },
	{ name: 'form-check', who: 'consultant', open: of(({ value }) => `${value}/check`) },
	{ name: 'form-check-missing', who: 'consultant', open: of(({ unfinished }) => `${unfinished}/check`) },
	{ name: 'versions', who: 'consultant', open: of(({ value }) => `${value}/history`) },
	{ name: 'result-value', who: 'consultant', open: of(({ value }) => `${value}/result`) },
	{ name: 'result-limit', who: 'consultant', open: of(({ limit }) => `${limit}/result`) },
	{ name: 'result-claim', who: 'reporter', open: of(({ claim }) => `${claim}/result`) }
];

/** @type {readonly Screen[]} */
const reportScreens = [
	{ name: 'reports', who: 'consultant', open: at('/reports') },
	{ name: 'reports-none', who: 'founder', open: at('/reports') },
	{ name: 'report-new', who: 'consultant', open: of(({ dossier }) => `${dossier}/reports/new`) },
	{ name: 'report-draft', who: 'consultant', open: of(({ draft }) => draft) },
	{ name: 'report-preview', who: 'consultant', open: of(({ preview }) => preview) },
	{ name: 'report-issue', who: 'consultant', open: of(({ draft }) => `${draft}/issue`) },
	{ name: 'report-issued', who: 'consultant', open: of(({ issued }) => issued) },
	{ name: 'report-links', who: 'consultant', open: of(({ issued }) => `${issued}/links`) },
	{
		name: 'report-links-made',
		who: 'consultant',
		open: async (page, { issued }) => {
			await visit(page, `${issued}/links`);
			await page.getByLabel('Whom is it for?').fill('The reader of the pictures');
			await press(page, 'Make the link');
			await page.getByLabel('Address', { exact: true }).waitFor();
		}
	},
	{
		name: 'report-links-faults',
		who: 'consultant',
		open: async (page, { issued }) => {
			await visit(page, `${issued}/links`);
			await press(page, 'Make the link');
			await faultsShown(page);
		}
	},
	{ name: 'shared', who: 'nobody', open: of(({ shared }) => shared) },
	{ name: 'shared-revoked', who: 'nobody', open: of(({ revoked }) => revoked), status: 410 },
	{ name: 'shared-unknown', who: 'nobody', open: at(`/shared/${'x'.repeat(43)}`), status: 404 }
];

/** @type {readonly Screen[]} */
export const screens = [...publicScreens, ...accountScreens, ...workScreens, ...reportScreens];
