import { mkdirSync, readdirSync, renameSync, rmSync } from 'node:fs';
import { join } from 'node:path';
import { chromium } from '@playwright/test';
import { ensureBuild } from './lib/build.mjs';
import { browserLaunch } from './lib/browser.mjs';
import { ensureDependencies, requireNode } from './lib/dependencies.mjs';
import { ensurePackages, packagesToTest } from './lib/packages.mjs';
import { dataFolder, ensureFolder, root } from './lib/paths.mjs';
import { PlainError, runScript } from './lib/plain-error.mjs';
import { prepareScreens } from './lib/prepare-screens.mjs';
import { endRunning, run } from './lib/run.mjs';
import { screens } from './lib/screens.mjs';
import { startDatabase, startForBrowser } from './lib/throw-away-service.mjs';

/*
 * `npm run shots`: a picture of every screen at two widths, light and dark, and of every page of a sample memo, in
 * shots/. Starts a throw-away service, or takes the one that E2E_ADDRESS, E2E_MAIL_READER and E2E_SIGN_INS name.
 * `npm run shots -- dossier` takes only the screens whose name contains one of the words given, and no memo.
 */

const folder = join(root, 'shots');
const widths = [360, 1280];
const schemes = /** @type {const} */ (['light', 'dark']);

/** @type {(() => Promise<void> | void)[]} */
const toStop = [];
const say = (/** @type {string} */ line) => console.log(line);

async function stopAll() {
	endRunning();
	for (const stop of toStop.splice(0).reverse()) await stop();
}

/** @returns {Promise<NodeJS.ProcessEnv>} */
async function service() {
	if (process.env.E2E_ADDRESS !== undefined) return process.env;
	requireNode();
	ensureFolder(dataFolder, true);
	await ensurePackages(packagesToTest, say);
	await ensureDependencies(say);
	await ensureBuild(say);
	const onStop = (/** @type {() => Promise<void> | void} */ stop) => void toStop.push(stop);
	const { url } = await startDatabase(onStop);
	const onCrash = (/** @type {string} */ reason) => {
		if (toStop.length > 0) console.error(`A part of the service ended. ${reason}`);
	};
	return await startForBrowser({ databaseUrl: url, say, onStop, onCrash });
}

/** @param {NodeJS.ProcessEnv} env @param {string} name */
function told(env, name) {
	const value = env[name];
	if (value === undefined) throw new PlainError(`${name} is not set beside E2E_ADDRESS.`);
	return value;
}

/**
 * @param {import('./lib/screens.mjs').Screen} screen
 * @param {import('./lib/prepare-screens.mjs').Places} places
 * @param {import('@playwright/test').Browser} browser
 */
async function pictures(screen, places, browser) {
	const context = await browser.newContext({
		baseURL: places.address,
		storageState: places.states[screen.who],
		reducedMotion: 'reduce',
		viewport: { width: 1280, height: 900 }
	});
	try {
		const page = await context.newPage();
		await screen.open(page, places);
		for (const width of widths) {
			await page.setViewportSize({ width, height: width < 720 ? 800 : 900 });
			for (const colorScheme of schemes) {
				await page.emulateMedia({ colorScheme });
				await page.screenshot({
					path: join(folder, `${screen.name}-${width}-${colorScheme}.png`),
					fullPage: true
				});
			}
		}
	} finally {
		await context.close();
	}
}

/** The pages of a signed sample memo, drawn by the samples command. */
async function memoPages() {
	const { code, output } = await run(process.execPath, [join(root, 'scripts', 'samples.mjs'), 'claim'], {
		cwd: root,
		quiet: true
	});
	if (code !== 0) throw new PlainError(`The sample memo could not be made.\n${output.trim()}`);
	const made = join(root, 'samples');
	const pages = readdirSync(made).filter((name) => /^client-memo-claim-\d+\.png$/.test(name));
	if (pages.length === 0)
		throw new PlainError(`The samples command drew no page of the memo.\n${output.trim()}`);
	for (const name of pages)
		renameSync(join(made, name), join(folder, name.replace('client-memo-claim', 'memo-page')));
	return pages.length;
}

/** @param {string[]} words */
async function main(words) {
	const env = await service();
	const chosen = screens.filter(
		({ name }) => words.length === 0 || words.some((word) => name.includes(word))
	);
	if (chosen.length === 0) throw new PlainError(`No screen has a name with ${words.join(' or ')}.`);
	if (words.length === 0) rmSync(folder, { recursive: true, force: true });
	mkdirSync(folder, { recursive: true });
	const browser = await chromium.launch(browserLaunch);
	toStop.push(() => browser.close());
	say('Signing in and looking up the work …');
	const places = await prepareScreens(browser, {
		address: told(env, 'E2E_ADDRESS'),
		mailReader: told(env, 'E2E_MAIL_READER'),
		signIns: JSON.parse(told(env, 'E2E_SIGN_INS'))
	});
	/** @type {string[]} */
	const failed = [];
	for (const screen of chosen) {
		try {
			await pictures(screen, places, browser);
			say(screen.name);
		} catch (error) {
			failed.push(`${screen.name}: ${error instanceof Error ? error.message : error}`);
		}
	}
	const pages = words.length === 0 ? await memoPages() : 0;
	const taken = (chosen.length - failed.length) * widths.length * schemes.length;
	say(
		`${taken} pictures of ${chosen.length - failed.length} screens and ${pages} of the memo are in ${folder}`
	);
	if (failed.length > 0) throw new PlainError(`Without picture:\n${failed.join('\n')}`);
}

for (const signal of /** @type {const} */ (['SIGINT', 'SIGTERM', 'SIGHUP'])) {
	process.on(signal, () => {
		void stopAll().then(() => process.exit(130));
	});
}

runScript(async () => {
	try {
		await main(process.argv.slice(2));
	} finally {
		await stopAll();
	}
});
