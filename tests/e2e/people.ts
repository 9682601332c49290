import { randomUUID } from 'node:crypto';
import { expect, type Browser, type Page } from '@playwright/test';
import { mailTo } from './house';
import { demoPerson, settled } from './support';

export interface Newcomer {
	name: string;
	email: string;
	password: string;
}

/** A person whom nobody has met yet. */
export function newcomer(): Newcomer {
	const id = randomUUID().slice(0, 8);
	return {
		name: `Runa Aldous ${id}`,
		email: `runa.${id}@example.org`,
		password: `quiet-slate-orchard-${id}`
	};
}

/** Fills the sign-up form and sends it. */
export async function signUp(page: Page, person: Newcomer, from = '/sign-up'): Promise<void> {
	await page.goto(from);
	await settled(page);
	await page.getByLabel('Your name').fill(person.name);
	await page.getByLabel('E-mail address').fill(person.email);
	await page.getByLabel('Password', { exact: true }).fill(person.password);
	await page.getByRole('button', { name: 'Make the account' }).click();
}

/** The link in the newest mail to a person, as path and query. */
export async function mailedPath(page: Page, email: string, part: RegExp): Promise<string> {
	let path: string | undefined;
	await expect(async () => {
		const mail = await mailTo(page.request, email);
		path = mail.links
			.map((link) => new URL(link))
			.map(({ pathname, search }) => pathname + search)
			.find((one) => part.test(one));
		expect(path, `a link to ${part} in the newest mail to ${email}`).toBeDefined();
	}).toPass({ timeout: 15_000 });
	return path as string;
}

/** A confirmed account, signed in, with an organisation of its own. */
export async function settleIn(page: Page, person: Newcomer, organisation: string): Promise<void> {
	await signUp(page, person);
	await expect(page).toHaveURL(/\/sign-up\/confirm$/);
	await page.goto(await mailedPath(page, person.email, /^\/confirm\//));
	await settled(page);
	await page.getByLabel('Password', { exact: true }).fill(person.password);
	await page.getByRole('button', { name: 'Confirm and sign in' }).click();
	await foundOrganisation(page, organisation);
}

export async function foundOrganisation(page: Page, name: string): Promise<void> {
	await expect(page).toHaveURL(/\/organisation\/new/);
	await settled(page);
	await page.getByLabel('Name of the organisation').fill(name);
	await page.getByLabel('Letters before report numbers').fill('RA');
	await page.getByRole('button', { name: 'Make the organisation' }).click();
	await expect(page).toHaveURL(/\/dossiers$/);
}

/** Sends the sign-in form; what comes of it is the test's. */
export async function trySignIn(
	page: Page,
	person: { email: string; password: string },
	from = '/sign-in'
): Promise<void> {
	await page.goto(from);
	await settled(page);
	await page.getByLabel('E-mail').fill(person.email);
	await page.getByLabel('Password', { exact: true }).fill(person.password);
	await page.getByRole('main').getByRole('button', { name: 'Sign in' }).click();
}

const kept = new Map<string, Awaited<ReturnType<ReturnType<Page['context']>['storageState']>>>();

/** A page of the demo's founder of an organisation; signs in once per test process, since tries are counted. */
export async function demoPage(
	browser: Browser,
	organisation = 'Tallis Brook Consulting',
	options: Parameters<Browser['newContext']>[0] = {}
): Promise<Page> {
	if (!kept.has(organisation)) {
		const context = await browser.newContext();
		const page = await context.newPage();
		await trySignIn(page, demoPerson(organisation));
		await expect(page).toHaveURL(/\/dossiers/);
		kept.set(organisation, await context.storageState());
		await context.close();
	}
	const context = await browser.newContext({ ...options, storageState: kept.get(organisation) });
	return context.newPage();
}
