import { spawn, spawnSync } from 'node:child_process';

/**
 * @typedef {object} RunOptions
 * @property {string} [cwd]
 * @property {NodeJS.ProcessEnv} [env]
 * @property {boolean} [quiet] keep the output and give it back instead of showing it
 * @property {number} [timeout] milliseconds after which the command is ended and counts as failed
 */

/** @type {Set<import('node:child_process').ChildProcess>} */
const running = new Set();

/**
 * Runs a command to its end.
 * @param {string} command
 * @param {string[]} args
 * @param {RunOptions} [options]
 * @returns {Promise<{ code: number, output: string }>} `output` is empty unless `quiet`
 */
export function run(command, args, options = {}) {
	return new Promise((resolve, reject) => {
		const child = spawn(command, args, {
			cwd: options.cwd,
			env: options.env ?? process.env,
			timeout: options.timeout,
			killSignal: 'SIGKILL',
			stdio: options.quiet ? ['ignore', 'pipe', 'pipe'] : ['ignore', 'inherit', 'inherit']
		});
		running.add(child);
		/** @type {Buffer[]} */
		const chunks = [];
		child.stdout?.on('data', (chunk) => chunks.push(chunk));
		child.stderr?.on('data', (chunk) => chunks.push(chunk));
		child.on('error', (error) => {
			running.delete(child);
			reject(error);
		});
		child.on('close', (code) => {
			running.delete(child);
			resolve({ code: code ?? 128, output: Buffer.concat(chunks).toString() });
		});
	});
}

/** Ends every command that `run` has going, for a stop in the middle of the set-up. */
export function endRunning() {
	for (const child of running) child.kill('SIGTERM');
}

/**
 * @param {string} command
 * @param {string[]} args
 * @returns {string | undefined} what it printed, trimmed; undefined where it failed or is not there
 */
export function capture(command, args) {
	const result = spawnSync(command, args, { encoding: 'utf8', stdio: ['ignore', 'pipe', 'ignore'] });
	return result.status === 0 ? result.stdout.trim() : undefined;
}

export const isRoot = process.getuid?.() === 0;
