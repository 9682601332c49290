import { join } from 'node:path';
import { setTimeout as sleep } from 'node:timers/promises';
import { ensureFolder, root } from './paths.mjs';
import { PlainError } from './plain-error.mjs';
import { startProgram } from './processes.mjs';
import { run } from './run.mjs';

/**
 * @typedef {object} ServiceOptions
 * @property {string} databaseUrl
 * @property {import('./secrets.mjs').Secrets} secrets
 * @property {{ web: number, smtp: number, mail: number, stripe: number }} ports
 * @property {() => Promise<void>} [releaseWebPort] called just before the web server takes its port
 * @property {string} folder for logs and mails
 * @property {NodeJS.ProcessEnv} [inherited] the caller's environment, of `process` unless given
 * @property {boolean} [dev] Vite's development server instead of the build
 * @property {(line: string) => void} say
 * @property {(stop: () => Promise<void>) => void} onStop is given, before anything starts, what stops it all
 */

/** @typedef {{ name: string, email: string, password: string, organisation: string, roles: string[] }} SignIn */

/**
 * @typedef {object} RunningService
 * @property {string} address
 * @property {string} mailReader
 * @property {string | undefined} payments address of the stand-in for payments; undefined where a real account is used
 * @property {SignIn[]} signIns
 * @property {number} workerProcessId
 * @property {Promise<string>} crashed resolves with the reason if a part ends by itself
 */

/**
 * Whether the caller pays through an account of their own; then the stand-in neither starts nor is named anywhere.
 * @param {NodeJS.ProcessEnv} inherited
 */
const hasOwnAccount = (inherited) => (inherited.STRIPE_SECRET_KEY ?? '') !== '';

/** @param {import('./secrets.mjs').Secrets} secrets @param {number} port */
const paymentEnvironment = (secrets, port) => ({
	STRIPE_SECRET_KEY: secrets.STRIPE_SECRET_KEY,
	STRIPE_WEBHOOK_SECRET: secrets.STRIPE_WEBHOOK_SECRET,
	/** Where the API is. */
	STRIPE_API_URL: `http://127.0.0.1:${port}`,
	/** Where the pages for paying are: the only foreign place that a form may lead to. */
	STRIPE_PAGES: `http://127.0.0.1:${port}`
});

/**
 * The environment of every part. What the caller's environment gives goes before what is made here.
 * @param {ServiceOptions} options
 * @returns {NodeJS.ProcessEnv}
 */
export function serviceEnvironment({ databaseUrl, secrets, ports, dev, inherited = process.env }) {
	const address = `http://127.0.0.1:${ports.web}`;
	const made = {
		AUTH_SECRET: secrets.AUTH_SECRET,
		SEALING_KEYS: secrets.SEALING_KEYS,
		SMTP_URL: `smtp://127.0.0.1:${ports.smtp}`,
		MAIL_READER_URL: `http://127.0.0.1:${ports.mail}/`,
		ORIGIN: address,
		NOONMARK_MODE: 'development',
		BODY_SIZE_LIMIT: '26M',
		SHUTDOWN_TIMEOUT: '5'
	};
	return {
		...made,
		...inherited,
		...(hasOwnAccount(inherited) ? {} : paymentEnvironment(secrets, ports.stripe)),
		NODE_ENV: dev ? 'development' : 'production',
		DATABASE_URL: databaseUrl,
		DEMO_PASSWORD: secrets.demoPassword,
		HOST: '127.0.0.1',
		PORT: String(ports.web)
	};
}

/** @param {string} name of a program of the worker build @param {NodeJS.ProcessEnv} env */
export async function runBuilt(name, env) {
	return await run(process.execPath, [join(root, '.workers', `${name}.js`)], { cwd: root, env, quiet: true });
}

/** @param {string} url @param {Promise<string>} crashed */
async function waitUntilReady(url, crashed) {
	const deadline = Date.now() + 90_000;
	let last = 'no answer';
	/** @type {string | undefined} */
	let reason;
	void crashed.then((text) => (reason = text));
	while (Date.now() < deadline) {
		if (reason !== undefined) throw new PlainError(reason);
		try {
			const response = await fetch(url, { signal: AbortSignal.timeout(5000) });
			if (response.status === 200) return;
			last = `${response.status} ${await response.text()}`;
		} catch (error) {
			last = String(error);
		}
		await sleep(200);
	}
	throw new PlainError(`${url} did not become ready within 90 s; it last said: ${last}`);
}

/**
 * Starts the stand-ins, web server and worker on a database that is up, after migrations and demo data, and waits until
 * they are ready.
 * @param {ServiceOptions} options
 * @returns {Promise<RunningService>}
 */
export async function startService(options) {
	const { ports, folder, secrets, dev = false, say, onStop, inherited = process.env } = options;
	const payments = hasOwnAccount(inherited) ? undefined : `http://127.0.0.1:${ports.stripe}`;
	const env = serviceEnvironment(options);
	const logs = ensureFolder(join(folder, 'logs'));
	/** @type {import('./processes.mjs').Service[]} */
	const parts = [];
	const stop = async () => {
		// The web server first: it may still be putting jobs into the worker's queue. The stand-ins last: both send
		// mail and pay. The database outlives them all.
		for (const part of parts.filter(({ name }) => name === 'web')) await part.stop();
		for (const part of parts.filter(({ name }) => name === 'worker')) await part.stop(30_000);
		for (const part of parts.filter(({ name }) => name !== 'web' && name !== 'worker')) await part.stop();
	};
	onStop(stop);
	/** @param {string} name @param {string[]} args @param {NodeJS.ProcessEnv} [more] */
	const start = (name, args, more = {}) => {
		const part = startProgram(name, args, { env: { ...env, ...more }, logs });
		parts.push(part);
		return part;
	};
	say('Applying migrations …');
	const migrated = await runBuilt('migrate', env);
	if (migrated.code !== 0) throw new PlainError(`The migrations failed.\n${migrated.output.trim()}`);
	start('mail', [join(root, 'scripts', 'smtp-sink.mjs')], {
		SMTP_PORT: String(ports.smtp),
		MAIL_READER_PORT: String(ports.mail),
		MAIL_FOLDER: ensureFolder(join(folder, 'mail'))
	});
	const address = `http://127.0.0.1:${ports.web}`;
	if (payments !== undefined) {
		const part = start('stripe', ['--import', 'tsx', join(root, 'stripe-fake', 'main.ts')], {
			STRIPE_FAKE_PORT: String(ports.stripe),
			STRIPE_FAKE_FILE: join(folder, 'stripe.json'),
			STRIPE_FAKE_KEY: secrets.STRIPE_SECRET_KEY,
			STRIPE_FAKE_WEBHOOK_URL: `${address}/webhooks/stripe`,
			STRIPE_FAKE_WEBHOOK_SECRET: secrets.STRIPE_WEBHOOK_SECRET
		});
		// The demo has subscribers.
		await waitUntilReady(`${payments}/_control/ready`, part.crashed);
		const catalogue = await runBuilt('catalogue', env);
		if (catalogue.code !== 0)
			throw new PlainError(`The prices could not be made.\n${catalogue.output.trim()}`);
	}
	say('Loading the demo …');
	const demo = await runBuilt('demo', env);
	if (demo.code !== 0) throw new PlainError(`The demo could not be loaded.\n${demo.output.trim()}`);
	/** @type {{ signIns: SignIn[] }} */
	const { signIns } = JSON.parse(demo.output.trim().split('\n').pop() ?? '');
	say('Starting …');
	const vite = join(root, 'node_modules', 'vite', 'bin', 'vite.js');
	await options.releaseWebPort?.();
	start(
		'web',
		dev
			? [vite, 'dev', '--host', '127.0.0.1', '--port', String(ports.web), '--strictPort']
			: [join(root, 'build', 'index.js')]
	);
	const worker = start('worker', [join(root, '.workers', 'worker.js')]);
	const crashed = Promise.race(parts.map((part) => part.crashed));
	await waitUntilReady(`${address}/readyz`, crashed);
	return {
		address: env.ORIGIN ?? address,
		mailReader: env.MAIL_READER_URL ?? '',
		payments,
		signIns,
		workerProcessId: worker.processId,
		crashed
	};
}
