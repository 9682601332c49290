import { join } from 'node:path';
import { ensureBuild, ensureWorkerBuild } from './lib/build.mjs';
import { ensureDependencies, requireNode } from './lib/dependencies.mjs';
import { holderOf, takeLock } from './lib/lock.mjs';
import { ensurePackages, packagesToTest } from './lib/packages.mjs';
import { dataFolder, ensureFolder } from './lib/paths.mjs';
import { explain, PlainError } from './lib/plain-error.mjs';
import { endRunning } from './lib/run.mjs';
import { checkStage, playwrightStage, programs, vitestStage } from './lib/stages.mjs';
import { addDatabase, cleanEnvironment, startDatabase, startForBrowser } from './lib/throw-away-service.mjs';

/*
 * `npm test`: sets up everything on a throw-away database, runs every stage whatever the others say, and ends with
 * the line "N passed, N failed". `npm test -- unit browser` runs those stages only.
 */

const began = Date.now();
const minutes = () => `${((Date.now() - began) / 60_000).toFixed(1)} min`;
/** @param {string} line */
const say = (line) => console.log(`[${minutes()}] ${line}`);

/** @type {(() => Promise<void> | void)[]} */
const toStop = [];
let ending = false;

/** @param {number} code */
async function end(code) {
	if (ending) return;
	ending = true;
	endRunning();
	for (const stop of toStop.reverse()) {
		try {
			await stop();
		} catch (error) {
			console.error(error);
		}
	}
	process.exitCode = code;
}

/** @typedef {import('./lib/stages.mjs').Count} Count */
/** @typedef {import('./lib/stages.mjs').StageContext} StageContext */

/** @type {Record<string, (context: StageContext) => Promise<Count>>} */
const stages = {
	format: (context) => checkStage(programs.prettier, ['--check', '--log-level', 'warn', '.'], context),
	lint: (context) => checkStage(programs.eslint, ['.'], context),
	types: (context) =>
		checkStage(
			programs.svelteCheck,
			['--tsconfig', './tsconfig.json', '--fail-on-warnings', '--output', 'human'],
			context
		),
	unit: (context) => vitestStage('unit', context),
	components: (context) => vitestStage('components', context),
	integration: async (context) => {
		await ensureWorkerBuild(say);
		return await vitestStage('integration', context);
	},
	build: async () => {
		await ensureBuild(say);
		return { passed: 1, failed: 0 };
	},
	permissions: (context) =>
		onService(context, 'permissions', (env) => vitestStage('permissions', { ...context, env })),
	browser: (context) => onService(context, 'browser', (env) => playwrightStage({ ...context, env }))
};

/**
 * Runs a stage on a service and a database of its own.
 * @param {StageContext} context
 * @param {string} name
 * @param {(env: NodeJS.ProcessEnv) => Promise<Count>} stage
 */
async function onService(context, name, stage) {
	await ensureBuild(say);
	if (cluster === undefined) throw new Error('There is no database.');
	const databaseUrl = await addDatabase(cluster.url, `noonmark_${name}`);
	/** @type {(() => Promise<void> | void)[]} */
	const parts = [];
	const stopAll = async () => {
		for (const stop of parts.splice(0).reverse()) await stop();
	};
	toStop.push(stopAll);
	const started = await startForBrowser({
		databaseUrl,
		say,
		onStop: (stop) => void parts.push(stop),
		onCrash: (reason) => {
			if (!ending) console.error(`A part of the service ended during the tests. ${reason}`);
		}
	});
	const count = await stage({ ...context.env, ...started, SERVICE_DATABASE: databaseUrl });
	await stopAll();
	return count;
}

/** @type {{ url: string } | undefined} */
let cluster;

/** @param {string[]} wanted */
async function main(wanted) {
	const unknown = wanted.filter((name) => stages[name] === undefined);
	if (unknown.length > 0) {
		throw new PlainError(
			`There is no stage ${unknown.join(', ')}. Stages: ${Object.keys(stages).join(', ')}.`
		);
	}
	const chosen = wanted.length > 0 ? wanted : Object.keys(stages);
	requireNode();
	ensureFolder(dataFolder, true);
	const lock = takeLock(join(dataFolder, 'test.lock'));
	if (!lock.held)
		throw new PlainError(
			`The tests are already running from this folder (process ${lock.holder.processId}).`
		);
	toStop.push(() => lock.release());
	if (holderOf(join(dataFolder, 'start.lock')) !== undefined) {
		say('A copy is running from this folder; if a source has changed since, restart it after the tests.');
	}
	await ensurePackages(packagesToTest, say);
	await ensureDependencies(say);
	const reports = ensureFolder(join(dataFolder, 'test-reports'));
	const env = cleanEnvironment();
	if (chosen.some((name) => ['integration', 'permissions', 'browser'].includes(name))) {
		cluster = await startDatabase((stop) => void toStop.push(stop));
		env.TEST_DATABASE_URL = cluster.url;
	}
	await checkStage(programs.svelteKit, ['sync'], { env, reports });

	const total = { passed: 0, failed: 0 };
	/** @type {string[]} */
	const summary = [];
	for (const name of chosen) {
		if (ending) return;
		say(`${name} …`);
		const from = Date.now();
		const count = await /** @type {(context: StageContext) => Promise<Count>} */ (stages[name])({
			env,
			reports
		}).catch((error) => {
			console.error(explain(error));
			return { passed: 0, failed: 1 };
		});
		total.passed += count.passed;
		total.failed += count.failed;
		const seconds = ((Date.now() - from) / 1000).toFixed(0);
		summary.push(
			`${name.padEnd(12)} ${`${count.passed} passed`.padStart(12)}, ${count.failed} failed  (${seconds} s)`
		);
	}
	if (ending) return;
	await end(total.failed === 0 ? 0 : 1);
	console.log(`\n${summary.join('\n')}\nall in ${minutes()}`);
	console.log(`${total.passed} passed, ${total.failed} failed`);
}

for (const signal of /** @type {const} */ (['SIGINT', 'SIGTERM', 'SIGHUP'])) {
	process.on(signal, () => {
		void end(130).then(() => process.exit(130));
	});
}

main(process.argv.slice(2)).catch(async (error) => {
	if (ending) return;
	console.error(explain(error));
	await end(1);
	console.log('0 passed, 1 failed');
});
