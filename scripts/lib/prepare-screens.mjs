import { randomUUID } from 'node:crypto';

/*
 * Signs three people in and finds, or makes, what the screens show: the demo's work, one draft with a preview, and a
 * newcomer who has no organisation yet. Used by the pictures and by the tests that visit every screen.
 */

/** @typedef {import('@playwright/test').Browser} Browser */
/** @typedef {import('@playwright/test').Page} Page */
/** @typedef {import('./service.mjs').SignIn} SignIn */
/** @typedef {'nobody' | 'newcomer' | 'founder' | 'consultant' | 'reporter'} Who */
/** @typedef {Awaited<ReturnType<import('@playwright/test').BrowserContext['storageState']>>} StoredState */

/**
 * @typedef {object} Places
 * @property {Record<Who, StoredState | undefined>} states signed-in browsers
 * @property {string} address
 * @property {string} dossier of the consultant, with calculations and an issued report
 * @property {string} limit calculation of the consultant, computed: a limit
 * @property {string} value calculation of the consultant, computed: a value
 * @property {string} unfinished calculation of the consultant, with an answer that cannot be
 * @property {string} claim calculation of the reporter, computed: a claim
 * @property {string} draft report of the consultant
 * @property {string} preview of that draft, done
 * @property {string} issued report of the consultant
 * @property {string} code of the issued report
 * @property {string} shared page that a link to it shows
 * @property {string} revoked page of a link to it that was taken back
 * @property {Buffer} pdf of the issued report
 * @property {string} confirmLink of a person who has not confirmed yet
 * @property {string} resetLink of that person's
 */

/** @param {Page} page Script has taken over the page's forms, and every first answer is in. */
export async function settled(page) {
	await page.waitForLoadState('networkidle');
}

/** @param {Page} page @param {string} path */
export async function visit(page, path) {
	await page.goto(path);
	await settled(page);
}

/** @param {Page} page @param {{ email: string, password: string }} person */
async function signIn(page, { email, password }) {
	await visit(page, '/sign-in');
	await page.getByLabel('E-mail').fill(email);
	await page.getByLabel('Password', { exact: true }).fill(password);
	await page.getByRole('main').getByRole('button', { name: 'Sign in' }).click();
	await page.waitForURL(/\/dossiers/);
}

/** @param {Page} page @param {string} path of a list @param {string} title @returns {Promise<string>} address */
async function linkIn(page, path, title) {
	await visit(page, `${path}?q=${encodeURIComponent(title)}`);
	const href = await page.getByRole('main').getByRole('link', { name: title }).first().getAttribute('href');
	if (href === null) throw new Error(`${path} has no link “${title}”.`);
	return href.replace(/\/(question|check|result)$/, '');
}

/**
 * @param {string} mailReader
 * @param {string} to
 * @param {string} part of the link
 */
async function linkInMail(mailReader, to, part) {
	const from = new URL(`messages?to=${encodeURIComponent(to)}`, mailReader);
	for (let i = 0; i < 100; i += 1) {
		/** @type {{ links: string[] }[]} */
		const mails = await (await fetch(from)).json();
		const link = mails.flatMap(({ links }) => links).find((one) => one.includes(part));
		if (link !== undefined) return new URL(link).pathname;
		await new Promise((resolve) => setTimeout(resolve, 200));
	}
	throw new Error(`No mail to ${to} with a link to ${part}.`);
}

/** @param {Page} page @param {string} email @param {string} password */
async function signUp(page, email, password) {
	await visit(page, '/sign-up');
	await page.getByLabel('Your name').fill('Runa Aldous');
	await page.getByLabel('E-mail address').fill(email);
	await page.getByLabel('Password', { exact: true }).fill(password);
	await page.getByRole('main').getByRole('button', { name: 'Make the account' }).click();
	await page.waitForURL(/\/sign-up\/confirm/);
}

const name = () => `runa.aldous.${randomUUID().slice(0, 8)}@example.org`;

/**
 * A person with a confirmed account and no organisation.
 * @param {Page} page
 * @param {string} mailReader
 * @returns {Promise<StoredState>}
 */
async function newcomer(page, mailReader) {
	const [email, password] = [name(), randomUUID()];
	await signUp(page, email, password);
	await visit(page, await linkInMail(mailReader, email, '/confirm/'));
	await page.getByLabel('Password', { exact: true }).fill(password);
	await page.getByRole('main').getByRole('button', { name: 'Confirm and sign in' }).click();
	await page.waitForURL(/\/organisation\/new/);
	return await page.context().storageState();
}

/**
 * The links mailed to a person who has signed up and forgotten the password before confirming.
 * @param {Page} page
 * @param {string} mailReader
 */
async function mailedLinks(page, mailReader) {
	const email = name();
	await signUp(page, email, randomUUID());
	const confirmLink = await linkInMail(mailReader, email, '/confirm/');
	await visit(page, '/reset');
	await page.getByLabel('E-mail address').fill(email);
	await page.getByRole('button', { name: 'Send the link' }).click();
	await page.getByRole('heading', { name: 'Look into your mailbox' }).waitFor();
	return { confirmLink, resetLink: await linkInMail(mailReader, email, '/reset/') };
}

/** @param {Page} page newcomer signed in @returns {Promise<StoredState>} with an organisation that has no work */
async function found(page) {
	await visit(page, '/organisation/new');
	await page.getByLabel('Name of the organisation').fill('Aldous Surveys');
	await page.getByLabel('Letters before report numbers').fill('AS');
	await page.getByRole('main').getByRole('button').click();
	await page.waitForURL(/\/dossiers/);
	return await page.context().storageState();
}

/** The address of the consultant's draft, made where there is none. @param {Page} page @param {string} dossier */
async function draftReport(page, dossier) {
	await visit(page, '/reports?state=draft');
	const known = page.getByRole('rowheader').getByRole('link').first();
	if ((await known.count()) > 0) return /** @type {string} */ (await known.getAttribute('href'));
	await visit(page, `${dossier}/reports/new`);
	await page.getByRole('button', { name: 'Make a draft' }).click();
	await page.waitForURL(/\/reports\/[0-9a-f-]{36}$/);
	return new URL(page.url()).pathname;
}

/** A copy of a calculation, which may be spoilt; made where there is none. @param {Page} page @param {string} title */
async function copyOf(page, title) {
	await visit(page, `/calculations?q=${encodeURIComponent(title)}`);
	const known = page.getByRole('rowheader').getByRole('link', { name: `${title} (copy)` });
	if ((await known.count()) > 0) return /** @type {string} */ (await known.first().getAttribute('href'));
	await visit(page, `${await linkIn(page, '/calculations', title)}/history`);
	await page.getByRole('button', { name: 'Duplicate this calculation' }).click();
	await page.waitForURL(/\/question$/);
	return new URL(page.url()).pathname.replace(/\/question$/, '');
}

/** A new link to an issued report. @param {Page} page @param {string} issued */
async function newLink(page, issued) {
	await visit(page, `${issued}/links`);
	await page.getByLabel('Whom is it for?').fill('The reader of the pictures');
	await page.getByRole('button', { name: 'Make the link' }).click();
	return new URL(await page.getByLabel('Address', { exact: true }).inputValue()).pathname;
}

/** @param {Page} page @param {string} issued */
async function links(page, issued) {
	const revoked = await newLink(page, issued);
	await page.locator('summary').filter({ hasText: 'Revoke' }).first().click();
	await page.getByRole('button', { name: 'Revoke this link' }).first().click();
	await page.getByRole('status').filter({ hasText: 'shows nothing any more' }).waitFor();
	return { revoked, shared: await newLink(page, issued) };
}

/** @param {Page} page signed in as the consultant */
async function consultantsWork(page) {
	const limit = await linkIn(page, '/calculations', 'Coated sheet, aged three years');
	const value = await linkIn(page, '/calculations', 'Sunlit side, local balance');
	const unfinished = await copyOf(page, 'Dark patch, half filled in');
	const dossier = await linkIn(page, '/dossiers', 'Roof surfaces, Marrow Coast');
	const issued = await linkIn(page, '/reports', 'Coated roof sheet');
	await visit(page, issued);
	const download = page.getByRole('link', { name: 'Download the signed PDF' });
	await download.waitFor({ timeout: 60_000 });
	const pdf = await (await page.request.get(`${issued}/file.pdf`)).body();
	const code = (await page.locator('a[href^="/verify/"] .mono').first().textContent()) ?? '';
	const { shared, revoked } = await links(page, issued);
	const draft = await draftReport(page, dossier);
	await visit(page, draft);
	await page.getByRole('button', { name: 'Save and preview' }).click();
	await page.getByRole('link', { name: 'Open the preview' }).waitFor({ timeout: 60_000 });
	const preview = new URL(page.url()).pathname;
	return { dossier, limit, value, unfinished, issued, code, pdf, shared, revoked, draft, preview };
}

/**
 * @param {Browser} browser
 * @param {{ address: string, mailReader: string, signIns: SignIn[] }} service
 * @returns {Promise<Places>}
 */
export async function prepareScreens(browser, { address, mailReader, signIns }) {
	/** @template T @param {(page: Page) => Promise<T>} work */
	const inBrowser = async (work) => {
		const context = await browser.newContext({ baseURL: address });
		context.setDefaultTimeout(30_000);
		try {
			return await work(await context.newPage());
		} finally {
			await context.close();
		}
	};
	/** @param {string} organisation */
	const founderOf = (organisation) => {
		const person = signIns.find((one) => one.organisation === organisation);
		if (person === undefined) throw new Error(`The demo has nobody in ${organisation}.`);
		return person;
	};
	const links = await inBrowser((page) => mailedLinks(page, mailReader));
	const without = await inBrowser((page) => newcomer(page, mailReader));
	const founder = await inBrowser(async (page) => {
		await newcomer(page, mailReader);
		return await found(page);
	});
	const consultant = await inBrowser(async (page) => {
		await signIn(page, founderOf('Tallis Brook Consulting'));
		return { work: await consultantsWork(page), state: await page.context().storageState() };
	});
	const reporter = await inBrowser(async (page) => {
		await signIn(page, founderOf('The Ferrow Courier'));
		const claim = await linkIn(page, '/calculations', 'The 38 degC of the notice');
		return { claim, state: await page.context().storageState() };
	});
	return {
		address,
		...consultant.work,
		claim: reporter.claim,
		...links,
		states: {
			nobody: undefined,
			newcomer: without,
			founder,
			consultant: consultant.state,
			reporter: reporter.state
		}
	};
}
