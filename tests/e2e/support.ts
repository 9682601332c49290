import { execFileSync } from 'node:child_process';
import { mkdtempSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { expect, type Page } from '@playwright/test';

interface SignIn {
	name: string;
	email: string;
	password: string;
	organisation: string;
}

/** The demo's people, as the start of the service printed them. */
export const signIns = JSON.parse(process.env.E2E_SIGN_INS ?? '[]') as SignIn[];

export function demoPerson(organisation: string): SignIn {
	const found = signIns.find((person) => person.organisation === organisation);
	if (found === undefined) throw new Error(`The demo has nobody in ${organisation}.`);
	return found;
}

/** Script has taken over the page's forms; before that a fill could be lost. */
export async function settled(page: Page): Promise<void> {
	await page.waitForLoadState('networkidle');
}

export async function signIn(page: Page, organisation = 'Tallis Brook Consulting'): Promise<void> {
	const person = demoPerson(organisation);
	await page.goto('/sign-in');
	await settled(page);
	await page.getByLabel('E-mail').fill(person.email);
	await page.getByLabel('Password', { exact: true }).fill(person.password);
	await page.getByRole('main').getByRole('button', { name: 'Sign in' }).click();
	await expect(page).toHaveURL(/\/dossiers/);
}

/** Makes a dossier and returns its address. */
export async function newDossier(
	page: Page,
	title: string,
	question: string,
	client: string
): Promise<string> {
	await page.goto('/dossiers/new');
	await settled(page);
	await page.locator('#title').fill(title);
	await page.locator('#question').fill(question);
	await page.locator('#client').fill(client);
	await page.getByRole('main').getByRole('button').first().click();
	await expect(page).toHaveURL(/\/dossiers\/[0-9a-f-]{36}$/);
	return page.url();
}

/** A folder with the service's root certificate in a trust store for pdfsig. */
export async function trustStore(page: Page): Promise<{ root: string; store: string }> {
	const folder = mkdtempSync(join(tmpdir(), 'noonmark-trust-'));
	const root = join(folder, 'root.pem');
	const response = await page.request.get('/verify/root.pem');
	expect(response.status()).toBe(200);
	writeFileSync(root, await response.body());
	execFileSync('certutil', ['-N', '-d', `sql:${folder}`, '--empty-password']);
	execFileSync('certutil', ['-A', '-d', `sql:${folder}`, '-n', 'root', '-t', 'CT,C,C', '-i', root]);
	return { root, store: folder };
}

export function temporaryFile(name: string, bytes: Buffer): string {
	const file = join(mkdtempSync(join(tmpdir(), 'noonmark-file-')), name);
	writeFileSync(file, bytes);
	return file;
}
