import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { root } from './paths.mjs';
import { run } from './run.mjs';

/**
 * @typedef {{ passed: number, failed: number }} Count
 * @typedef {{ env: NodeJS.ProcessEnv, reports: string }} StageContext
 */

/** @param {string} name of a package's program @param {string} path of it in node_modules */
const tool = (name, path) => join(root, 'node_modules', name, path);

/** A stage may hang on a fault; it then counts as failed instead of holding up all others. */
const patience = 15 * 60_000;
/** The browser goes through every screen at both widths and in both schemes. */
const browserPatience = 45 * 60_000;

/**
 * A command that passes or fails as a whole: one check.
 * @param {string} path
 * @param {string[]} args
 * @param {StageContext} context
 * @returns {Promise<Count>}
 */
export async function checkStage(path, args, { env }) {
	const { code } = await run(process.execPath, [path, ...args], { cwd: root, env, timeout: patience });
	return code === 0 ? { passed: 1, failed: 0 } : { passed: 0, failed: 1 };
}

export const programs = {
	svelteKit: tool('@sveltejs/kit', 'svelte-kit.js'),
	svelteCheck: tool('svelte-check', 'bin/svelte-check'),
	eslint: tool('eslint', 'bin/eslint.js'),
	prettier: tool('prettier', 'bin/prettier.cjs'),
	vitest: tool('vitest', 'vitest.mjs'),
	playwright: tool('@playwright/test', 'cli.js')
};

/**
 * @param {string} file
 * @returns {any} undefined where it was not written or is no JSON
 */
function readReport(file) {
	try {
		return JSON.parse(readFileSync(file, 'utf8'));
	} catch {
		return undefined;
	}
}

/**
 * Counts by the report, but never believes it against the exit code: a run that failed has at least one failure, and a
 * run without any test is a failure too.
 * @param {number} code
 * @param {number} passed
 * @param {number} failed
 * @returns {Count}
 */
function honest(code, passed, failed) {
	const broken = (code !== 0 && failed === 0) || passed + failed === 0;
	return { passed, failed: broken ? failed + 1 : failed };
}

/**
 * @param {string} project
 * @param {StageContext} context
 * @returns {Promise<Count>}
 */
export async function vitestStage(project, { env, reports }) {
	const file = join(reports, `${project}.json`);
	const args = [
		'run',
		'--project',
		project,
		'--reporter=default',
		'--reporter=json',
		`--outputFile.json=${file}`
	];
	const { code } = await run(process.execPath, [programs.vitest, ...args], {
		cwd: root,
		env,
		timeout: patience
	});
	const report = readReport(file);
	if (report?.numPendingTests > 0)
		console.log(`${report.numPendingTests} tests of "${project}" did not run.`);
	// A file that could not be loaded has no test of its own to count.
	const unloaded = (report?.testResults ?? []).filter(
		/** @param {{ status: string, assertionResults: unknown[] }} result */
		(result) => result.status === 'failed' && result.assertionResults.length === 0
	).length;
	return honest(code, report?.numPassedTests ?? 0, (report?.numFailedTests ?? 0) + unloaded);
}

/**
 * @param {StageContext} context
 * @returns {Promise<Count>}
 */
export async function playwrightStage({ env, reports }) {
	const file = join(reports, 'browser.json');
	const { code } = await run(process.execPath, [programs.playwright, 'test', '--reporter=list,json'], {
		cwd: root,
		env: { ...env, PLAYWRIGHT_JSON_OUTPUT_NAME: file },
		timeout: browserPatience
	});
	const stats = readReport(file)?.stats;
	if (stats?.skipped > 0) console.log(`${stats.skipped} browser tests did not run.`);
	return honest(code, stats?.expected ?? 0, (stats?.unexpected ?? 0) + (stats?.flaky ?? 0));
}
