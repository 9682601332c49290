import { join } from 'node:path';
import { ensureBuild, ensureWorkerBuild } from './lib/build.mjs';
import { ensureDependencies, requireNode } from './lib/dependencies.mjs';
import { takeLock } from './lib/lock.mjs';
import { ensurePackages, packagesToRun } from './lib/packages.mjs';
import { dataFolder, ensureFolder } from './lib/paths.mjs';
import { explain, PlainError } from './lib/plain-error.mjs';
import { portFor, webPort } from './lib/ports.mjs';
import { clusterFolder, requireDatabase, startCluster, stopCluster } from './lib/postgres.mjs';
import { endRunning } from './lib/run.mjs';
import { keptSecrets } from './lib/secrets.mjs';
import { startService } from './lib/service.mjs';

/*
 * `npm start`: sets up whatever is missing on this machine and in this checkout, then runs all of Noonmark on
 * 127.0.0.1 until Ctrl-C. Built-in modules only up to the point where the packages are installed.
 */

const dev = process.argv.includes('--dev');
const began = Date.now();
const seconds = () => `${((Date.now() - began) / 1000).toFixed(1)} s`;

/** @param {string} line */
const say = (line) => console.log(`${seconds().padStart(8)}  ${line}`);

/** What has to be stopped, in the order it was started. @type {(() => Promise<void>)[]} */
const toStop = [];
let stopping = false;

/** Stops everything, last started first, and ends. @param {number} code @param {string} [reason] */
async function stopAll(code, reason) {
	if (stopping) return;
	stopping = true;
	if (reason !== undefined) console.error(reason);
	endRunning();
	for (const stop of toStop.reverse()) {
		await stop().catch((error) => {
			console.error(explain(error));
			code = 1;
		});
	}
	if (code === 0) console.log('Stopped.');
	process.exit(code);
}

/** @param {import('./lib/service.mjs').RunningService} service */
function announce(service) {
	const width = Math.max(...service.signIns.map(({ email }) => email.length), 0);
	const signIns = service.signIns
		.slice(0, 2)
		.map(
			({ email, password, name, organisation, roles }) =>
				`  ${email.padEnd(width)}  ${password}  (${name}, ${organisation}: ${roles.join(', ')})`
		);
	console.log(
		[
			'',
			`Noonmark is running after ${seconds()}: ${service.address}`,
			'',
			...(signIns.length > 0 ? ['Sign in as', ...signIns, ''] : []),
			`Mail that it sends can be read at ${service.mailReader}`,
			...(service.payments === undefined
				? []
				: [`Payments go to a local stand-in that takes no money: ${service.payments}/`]),
			'Ctrl-C stops it.',
			''
		].join('\n')
	);
}

async function main() {
	requireNode();
	ensureFolder(dataFolder, true);
	const lock = takeLock(join(dataFolder, 'start.lock'));
	if (!lock.held) {
		const where = lock.holder.note === '' ? '' : ` at ${lock.holder.note}`;
		throw new PlainError(
			`Noonmark is already running from this folder${where} (process ${lock.holder.processId}).`
		);
	}
	toStop.push(async () => lock.release());
	const givenDatabase = process.env.DATABASE_URL;
	const ownDatabase = givenDatabase === undefined || givenDatabase === '';
	if (ownDatabase) await ensurePackages(packagesToRun, say);
	await ensureDependencies(say);
	const web = await webPort(process.env.PORT);
	const ports = {
		web: web.port,
		smtp: await portFor('SMTP_PORT', process.env.SMTP_PORT),
		mail: await portFor('MAIL_READER_PORT', process.env.MAIL_READER_PORT),
		stripe: await portFor('STRIPE_PORT', process.env.STRIPE_PORT)
	};
	const secrets = keptSecrets();
	let databaseUrl = givenDatabase ?? '';
	if (ownDatabase) {
		const folder = clusterFolder(say);
		const port = await portFor('DATABASE_PORT', process.env.DATABASE_PORT);
		say('Starting the database …');
		toStop.push(() => stopCluster(folder));
		const cluster = await startCluster({
			folder,
			port,
			password: secrets.databasePassword,
			keeperPassword: secrets.databaseKeeperPassword,
			durable: true
		});
		databaseUrl = cluster.url;
	} else {
		await requireDatabase(databaseUrl);
	}
	await (dev ? ensureWorkerBuild(say) : ensureBuild(say));
	const service = await startService({
		databaseUrl,
		secrets,
		ports,
		folder: dataFolder,
		releaseWebPort: web.release,
		dev,
		say,
		onStop: (stop) => void toStop.push(stop)
	});
	lock.note(service.address);
	void service.crashed.then((reason) => stopAll(1, reason));
	announce(service);
}

for (const signal of /** @type {const} */ (['SIGINT', 'SIGTERM', 'SIGHUP'])) {
	process.on(signal, () => void stopAll(0));
}

main().catch((error) => {
	// A stop in the middle of the set-up breaks what was going on; that is no fault.
	if (!stopping) void stopAll(1, explain(error));
});
