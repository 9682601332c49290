import { readFileSync, writeFileSync } from 'node:fs';
import { createServer } from 'node:net';
import { join } from 'node:path';
import { dataFolder } from './paths.mjs';
import { PlainError } from './plain-error.mjs';

const loopback = '127.0.0.1';

/**
 * @param {number} port 0 for any
 * @returns {Promise<number | undefined>} the port, once it was opened and closed again; undefined where it is taken
 */
function tryPort(port) {
	return new Promise((resolve) => {
		const server = createServer();
		server.once('error', () => resolve(undefined));
		server.listen({ port, host: loopback, exclusive: true }, () => {
			const address = server.address();
			server.close(() => resolve(typeof address === 'object' && address !== null ? address.port : undefined));
		});
	});
}

/** @param {number} port */
export async function isFree(port) {
	return (await tryPort(port)) !== undefined;
}

/** @returns {Promise<number>} a port that nobody listens on */
export async function freePort() {
	const port = await tryPort(0);
	if (port === undefined) throw new PlainError('This machine gives no free port on 127.0.0.1.');
	return port;
}

const memory = join(dataFolder, 'ports.json');

/** @returns {Record<string, number>} */
function remembered() {
	try {
		return JSON.parse(readFileSync(memory, 'utf8'));
	} catch {
		return {};
	}
}

/**
 * A free port that stays the same from start to start as long as nobody else takes it.
 * @param {string} name
 * @param {string | undefined} given from the environment; taken as it is
 */
export async function portFor(name, given) {
	if (given !== undefined && given !== '') return await givenPort(name, given);
	const before = remembered()[name];
	if (before !== undefined && (await isFree(before))) return before;
	const port = await freePort();
	writeFileSync(memory, `${JSON.stringify({ ...remembered(), [name]: port }, null, '\t')}\n`);
	return port;
}

/**
 * @param {string} name
 * @param {string} given
 */
async function givenPort(name, given) {
	const port = Number(given);
	if (!Number.isInteger(port) || port < 1 || port > 65535) {
		throw new PlainError(`${name}=${given} is not a port: give a whole number from 1 to 65535.`);
	}
	if (!(await isFree(port))) {
		throw new PlainError(`Port ${port} (${name}) is taken. Stop what uses it, or give another port.`);
	}
	return port;
}

/** The web server's port: `PORT`, or 3000, or the next one that is free. @param {string | undefined} given */
export async function webPort(given) {
	if (given !== undefined && given !== '') return await givenPort('PORT', given);
	for (let port = 3000; port < 3200; port += 1) {
		if (await isFree(port)) return port;
	}
	return await freePort();
}
