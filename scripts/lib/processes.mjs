import { spawn } from 'node:child_process';
import { closeSync, existsSync, openSync, readFileSync, renameSync } from 'node:fs';
import { join } from 'node:path';
import { pathToFileURL } from 'node:url';
import { root } from './paths.mjs';

const followParent = pathToFileURL(join(root, 'scripts', 'lib', 'follow-parent.mjs')).href;

/**
 * @typedef {object} Service
 * @property {string} name
 * @property {number} processId
 * @property {(graceMilliseconds?: number) => Promise<void>} stop asks it to end, and ends it after the grace
 * @property {Promise<string>} crashed resolves with the reason if it ends without being asked to; otherwise never
 */

/**
 * Starts a Node program that runs until it is stopped. Its output goes to `<logs>/<name>.log`; the log of the start
 * before is kept beside it.
 * @param {string} name
 * @param {string[]} args program and arguments
 * @param {{ env: NodeJS.ProcessEnv, logs: string }} options
 * @returns {Service}
 */
export function startProgram(name, args, { env, logs }) {
	const logFile = join(logs, `${name}.log`);
	if (existsSync(logFile)) renameSync(logFile, `${logFile}.1`);
	const log = openSync(logFile, 'a', 0o600);
	// A process group of its own: Ctrl-C reaches this script alone, which then stops everything in order.
	const child = spawn(process.execPath, ['--import', followParent, ...args], {
		cwd: root,
		env,
		detached: true,
		stdio: ['pipe', log, log]
	});
	closeSync(log);
	let asked = false;
	/** @type {Promise<string>} */
	const ended = new Promise((resolve) => {
		child.on('error', (error) => resolve(`${name} could not be started: ${error.message}`));
		child.on('exit', (code, signal) => {
			const tail = readFileSync(logFile, 'utf8').trim().split('\n').slice(-20).join('\n');
			resolve(`${name} ended (${signal ?? `exit code ${code}`}). The end of ${logFile}:\n${tail}`);
		});
	});
	return {
		name,
		processId: child.pid ?? 0,
		crashed: new Promise((resolve) => {
			void ended.then((reason) => {
				if (!asked) resolve(reason);
			});
		}),
		stop: async (graceMilliseconds = 10_000) => {
			asked = true;
			if (child.pid === undefined) return;
			child.kill('SIGTERM');
			const timer = setTimeout(() => signalGroup(child.pid, 'SIGKILL'), graceMilliseconds);
			await ended;
			clearTimeout(timer);
			// Whatever it may have started itself.
			signalGroup(child.pid, 'SIGKILL');
		}
	};
}

/** @param {number | undefined} group @param {NodeJS.Signals} signal */
function signalGroup(group, signal) {
	if (group === undefined) return;
	try {
		process.kill(-group, signal);
	} catch {
		// Nobody is left in it.
	}
}
