import { rmSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { dataFolder, ensureFolder } from './paths.mjs';
import { freePort } from './ports.mjs';
import { startCluster, stopCluster, throwAwayFolder } from './postgres.mjs';
import { makeSecrets } from './secrets.mjs';
import { startService } from './service.mjs';

/* A database and a service for one run of tests or pictures; nothing of them stays. */

/** @typedef {(stop: () => Promise<void> | void) => void} OnStop is given, before anything starts, what ends it */

/** The environment without the caller's settings for a service of their own. @returns {NodeJS.ProcessEnv} */
export function cleanEnvironment() {
	const own =
		/^(DATABASE_URL|PORT|HOST|ORIGIN|AUTH_SECRET|SEALING_KEYS|SMTP_URL|MAIL_.*|STRIPE_.*|NOONMARK_.*|NODE_ENV)$/;
	return Object.fromEntries(Object.entries(process.env).filter(([name]) => !own.test(name)));
}

/** A database cluster for this run alone. @param {OnStop} onStop @returns {Promise<{ url: string }>} */
export async function startDatabase(onStop) {
	const folder = throwAwayFolder();
	const { databasePassword, databaseKeeperPassword } = makeSecrets();
	onStop(async () => {
		await stopCluster(folder);
		rmSync(dirname(folder), { recursive: true, force: true });
	});
	return await startCluster({
		folder,
		port: await freePort(),
		password: databasePassword,
		keeperPassword: databaseKeeperPassword,
		durable: false
	});
}

/**
 * An empty database beside the cluster's first one, for a service of its own: what one seals with its keys, another
 * could not open.
 * @param {string} clusterUrl
 * @param {string} name
 * @returns {Promise<string>} its address
 */
export async function addDatabase(clusterUrl, name) {
	const { default: postgres } = await import('pg');
	const client = new postgres.Client({ connectionString: clusterUrl });
	await client.connect();
	try {
		await client.query(`create database ${client.escapeIdentifier(name)}`);
	} finally {
		await client.end();
	}
	const url = new URL(clusterUrl);
	url.pathname = `/${name}`;
	return url.href;
}

/**
 * The whole service on free ports, with what a browser run is told about it. The builds must be there.
 * @param {object} options
 * @param {string} options.databaseUrl
 * @param {(line: string) => void} options.say
 * @param {OnStop} options.onStop
 * @param {(reason: string) => void} options.onCrash a part ended by itself
 * @returns {Promise<Record<'E2E_ADDRESS' | 'E2E_MAIL_READER' | 'E2E_STRIPE' | 'E2E_SIGN_INS' | 'E2E_WORKER_PROCESS', string>>}
 */
export async function startForBrowser({ databaseUrl, say, onStop, onCrash }) {
	const folder = ensureFolder(join(dataFolder, `test-${process.pid}`));
	onStop(() => rmSync(folder, { recursive: true, force: true }));
	const service = await startService({
		databaseUrl,
		secrets: makeSecrets(),
		ports: {
			web: await freePort(),
			smtp: await freePort(),
			mail: await freePort(),
			stripe: await freePort()
		},
		inherited: cleanEnvironment(),
		folder,
		say,
		onStop
	});
	void service.crashed.then(onCrash);
	return {
		E2E_ADDRESS: service.address,
		E2E_MAIL_READER: service.mailReader,
		E2E_STRIPE: service.payments ?? '',
		E2E_SIGN_INS: JSON.stringify(service.signIns),
		E2E_WORKER_PROCESS: String(service.workerProcessId)
	};
}
