import { readFileSync, writeFileSync } from 'node:fs';
import { createServer } from 'node:net';
import { join } from 'node:path';
import { dataFolder } from './paths.mjs';
import { PlainError } from './plain-error.mjs';

const loopback = '127.0.0.1';

/**
 * Listens on a port, so that nobody else takes it until it is needed.
 * @param {number} port 0 for any
 * @returns {Promise<{ port: number, release: () => Promise<void> } | undefined>} undefined where it is taken
 */
function holdPort(port) {
	return new Promise((resolve) => {
		const server = createServer((socket) => socket.destroy());
		server.once('error', () => resolve(undefined));
		server.listen({ port, host: loopback, exclusive: true }, () => {
			const address = server.address();
			server.unref();
			resolve({
				port: typeof address === 'object' && address !== null ? address.port : port,
				release: () => new Promise((released) => server.close(() => released()))
			});
		});
	});
}

/** @param {number} port 0 for any @returns {Promise<number | undefined>} undefined where it is taken */
async function tryPort(port) {
	const held = await holdPort(port);
	await held?.release();
	return held?.port;
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

/**
 * The web server's port, `PORT` or 3000 or the next one that is free; held, so that two copies that start at the same
 * time choose different ones.
 * @param {string | undefined} given
 * @returns {Promise<{ port: number, release: () => Promise<void> }>}
 */
export async function webPort(given) {
	const from = given === undefined || given === '' ? 3000 : await givenPort('PORT', given);
	const to = given === undefined || given === '' ? from + 199 : from;
	for (let port = from; port <= to; port += 1) {
		const held = await holdPort(port);
		if (held !== undefined) return held;
	}
	throw new PlainError(`No port from ${from} to ${to} is free. Give another one as PORT.`);
}
