import { existsSync, readdirSync } from 'node:fs';
import { delimiter, join } from 'node:path';
import { PlainError } from './plain-error.mjs';
import { isRoot, run } from './run.mjs';

/** @param {string} program */
function onPath(program) {
	return (process.env.PATH ?? '').split(delimiter).some((folder) => existsSync(join(folder, program)));
}

/**
 * The newest PostgreSQL's folder of programs, or undefined.
 * @returns {string | undefined}
 */
export function postgresPrograms() {
	const debian = '/usr/lib/postgresql';
	const versions = existsSync(debian) ? readdirSync(debian).map(Number).filter(Number.isFinite) : [];
	for (const version of versions.sort((a, b) => b - a)) {
		const folder = join(debian, String(version), 'bin');
		if (existsSync(join(folder, 'initdb')) && existsSync(join(folder, 'pg_ctl'))) return folder;
	}
	return (process.env.PATH ?? '')
		.split(delimiter)
		.find((folder) => existsSync(join(folder, 'initdb')) && existsSync(join(folder, 'pg_ctl')));
}

/** What each Debian package is needed for is told by the program that must be there. */
const present = {
	postgresql: () => postgresPrograms() !== undefined,
	chromium: () => onPath('chromium'),
	'poppler-utils': () => onPath('pdfsig') && onPath('pdftotext'),
	qpdf: () => onPath('qpdf'),
	'libnss3-tools': () => onPath('certutil'),
	openssl: () => onPath('openssl')
};

/** @typedef {keyof typeof present} DebianPackage */

/** @type {readonly DebianPackage[]} */
export const packagesToRun = ['postgresql'];
/** @type {readonly DebianPackage[]} */
export const packagesToTest = ['postgresql', 'chromium', 'poppler-utils', 'qpdf', 'libnss3-tools', 'openssl'];

/**
 * Makes sure that the programs of these Debian packages are there: installs them as root, says how otherwise.
 * @param {readonly DebianPackage[]} wanted
 * @param {(line: string) => void} say
 */
export async function ensurePackages(wanted, say) {
	const missing = wanted.filter((name) => !present[name]());
	if (missing.length === 0) return;
	const names = missing.join(' ');
	const command = `apt-get update && apt-get install -y --no-install-recommends ${names}`;
	if (!isRoot || !onPath('apt-get')) {
		throw new PlainError(`Missing on this machine: ${missing.join(', ')}. Run: sudo sh -c '${command}'`);
	}
	say(`Installing ${missing.join(', ')} from Debian …`);
	const env = { ...process.env, DEBIAN_FRONTEND: 'noninteractive', NEEDRESTART_MODE: 'a' };
	const apt = ['-q', '-o', 'DPkg::Lock::Timeout=300', '-o', 'Acquire::Retries=3'];
	const update = await run('apt-get', [...apt, 'update'], { env, quiet: true });
	const install = await run('apt-get', [...apt, 'install', '-y', '--no-install-recommends', ...missing], {
		env,
		quiet: true
	});
	const stillMissing = wanted.filter((name) => !present[name]());
	if (install.code !== 0 || stillMissing.length > 0) {
		const tail = (update.code === 0 ? install.output : update.output + install.output)
			.trim()
			.split('\n')
			.slice(-15);
		throw new PlainError(
			`Debian's packages could not be installed. Run it by hand: ${command}\n${tail.join('\n')}`
		);
	}
}
