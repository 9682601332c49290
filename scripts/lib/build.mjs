import { existsSync, readdirSync, readFileSync, statSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { root } from './paths.mjs';
import { PlainError } from './plain-error.mjs';
import { run } from './run.mjs';

const sources = [
	'src',
	'static',
	'report-templates',
	'drizzle',
	'package-lock.json',
	'svelte.config.js',
	'tailwind.config.ts',
	'tsconfig.json',
	'vite.config.ts',
	'vite.workers.config.ts'
];

/** @param {string} path @returns {number} newest change below it; a folder's own time tells of deletions */
function newestChange(path) {
	if (!existsSync(path)) return 0;
	const stat = statSync(path);
	if (!stat.isDirectory()) return stat.mtimeMs;
	return readdirSync(path).reduce(
		(newest, name) => Math.max(newest, newestChange(join(path, name))),
		stat.mtimeMs
	);
}

/** @param {string} output @param {string} entry */
function isFresh(output, entry) {
	const stamp = join(root, output, '.built-from');
	if (!existsSync(stamp) || !existsSync(join(root, output, entry))) return false;
	const newest = sources.reduce((sofar, name) => Math.max(sofar, newestChange(join(root, name))), 0);
	return newest <= Number(readFileSync(stamp, 'utf8'));
}

/** @param {string} output @param {number} began when the build began: what changed since is not in it */
function stamp(output, began) {
	writeFileSync(join(root, output, '.built-from'), String(began));
}

const vite = join(root, 'node_modules', 'vite', 'bin', 'vite.js');

/** @param {string[]} args */
async function viteBuild(args) {
	const result = await run(process.execPath, [vite, 'build', '--logLevel', 'error', ...args], {
		cwd: root,
		quiet: true
	});
	if (result.code !== 0) throw new PlainError(`The build failed.\n${result.output.trim()}`);
}

/** Builds the worker's programs if a source is newer. @param {(line: string) => void} say */
export async function ensureWorkerBuild(say) {
	if (isFresh('.workers', 'worker.js')) return;
	say('Building the worker …');
	const began = Date.now();
	await viteBuild(['-c', 'vite.workers.config.ts']);
	stamp('.workers', began);
}

/** Builds the web server if a source is newer. @param {(line: string) => void} say */
export async function ensureWebBuild(say) {
	if (isFresh('build', 'index.js')) return;
	say('Building the web server …');
	const began = Date.now();
	await viteBuild([]);
	stamp('build', began);
}

/** @param {(line: string) => void} say */
export async function ensureBuild(say) {
	await ensureWebBuild(say);
	await ensureWorkerBuild(say);
}
