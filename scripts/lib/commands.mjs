import {
	existsSync,
	mkdirSync,
	readdirSync,
	readFileSync,
	renameSync,
	statSync,
	writeFileSync
} from 'node:fs';
import { basename, join } from 'node:path';
import { pathToFileURL } from 'node:url';
import { root } from './paths.mjs';

/*
 * The commands that need neither server nor build: src/commands/NAME.ts, bundled to .commands/NAME.mjs. Packages stay
 * outside the bundle. `npm ci` bundles them once; a command whose sources changed since is bundled again when it runs.
 */

const sources = join(root, 'src', 'commands');
const output = join(root, '.commands');

/** @param {string} name */
const placesOf = (name) => ({
	entry: join(sources, `${name}.ts`),
	bundle: join(output, `${name}.mjs`),
	inputs: join(output, `${name}.inputs.json`)
});

/** Names of all commands. */
export function commandNames() {
	return readdirSync(sources)
		.filter((file) => file.endsWith('.ts') && !file.endsWith('.test.ts'))
		.map((file) => basename(file, '.ts'));
}

/** @param {string} name whether every source that went into the bundle is older than it */
function isFresh(name) {
	const { bundle, inputs } = placesOf(name);
	if (!existsSync(bundle) || !existsSync(inputs)) return false;
	/** @type {{ began: number, files: string[] }} */
	const { began, files } = JSON.parse(readFileSync(inputs, 'utf8'));
	return files.every((file) => {
		const path = join(root, file);
		return existsSync(path) && statSync(path).mtimeMs < began;
	});
}

/** Writes beside and renames, so that a command that starts meanwhile never reads half a file. @param {string} path @param {string | Uint8Array} content */
function replace(path, content) {
	const draft = `${path}.${process.pid}`;
	writeFileSync(draft, content);
	renameSync(draft, path);
}

/** @param {string} name */
export async function bundleCommand(name) {
	const { build } = await import('esbuild');
	const { entry, bundle, inputs } = placesOf(name);
	const began = Date.now();
	const result = await build({
		entryPoints: [entry],
		outfile: bundle,
		absWorkingDir: root,
		bundle: true,
		platform: 'node',
		target: 'node20',
		format: 'esm',
		packages: 'external',
		alias: { $lib: join(root, 'src', 'lib') },
		logLevel: 'error',
		metafile: true,
		write: false
	});
	mkdirSync(output, { recursive: true });
	for (const file of result.outputFiles) replace(file.path, file.contents);
	const files = [...Object.keys(result.metafile.inputs), 'package-lock.json'];
	replace(inputs, JSON.stringify({ began, files }));
}

/** Runs a command in this process with this process's arguments, bundled anew where a source is newer. @param {string} name */
export async function runCommand(name) {
	if (!isFresh(name)) await bundleCommand(name);
	await import(pathToFileURL(placesOf(name).bundle).href);
}
