import { existsSync, lstatSync, rmSync, statSync } from 'node:fs';
import { join } from 'node:path';
import { root } from './paths.mjs';
import { PlainError } from './plain-error.mjs';
import { run } from './run.mjs';

const oldest = [20, 19];

/** @throws {PlainError} if this Node.js is too old */
export function requireNode() {
	const [major = 0, minor = 0] = process.versions.node.split('.').map(Number);
	const [needMajor = 0, needMinor = 0] = oldest;
	if (major > needMajor || (major === needMajor && minor >= needMinor)) return;
	throw new PlainError(
		`Noonmark needs Node.js ${oldest.join('.')} or newer; this is ${process.versions.node}. Install it and start again.`
	);
}

/** Installs the packages of the lock file where they are missing or older than it. @param {(line: string) => void} say */
export async function ensureDependencies(say) {
	const lock = join(root, 'package-lock.json');
	// npm writes this one last.
	const installed = join(root, 'node_modules', '.package-lock.json');
	if (existsSync(installed) && statSync(installed).mtimeMs >= statSync(lock).mtimeMs) return;
	// npm empties the folder first, and would do so through a link, in somebody else's checkout.
	if (lstatSync(join(root, 'node_modules'), { throwIfNoEntry: false })?.isSymbolicLink()) {
		throw new PlainError('node_modules is a link to another folder. Remove the link and start again.');
	}
	say('Installing the packages of package-lock.json …');
	const env = { ...process.env, NODE_ENV: 'development' };
	const result = await run('npm', ['ci', '--include=dev', '--no-audit', '--no-fund', '--loglevel=error'], {
		cwd: root,
		env,
		quiet: true
	});
	if (result.code !== 0) {
		// Half an installation must not pass for a whole one at the next start.
		rmSync(installed, { force: true });
		throw new PlainError(`npm ci failed. Mend what it says and start again.\n${result.output.trim()}`);
	}
}
