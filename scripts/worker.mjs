import { join } from 'node:path';
import { ensureWorkerBuild } from './lib/build.mjs';
import { root } from './lib/paths.mjs';
import { runScript } from './lib/plain-error.mjs';

/* The worker process alone, in this process and with this environment; `npm start` runs it along with the rest. */
runScript(async () => {
	await ensureWorkerBuild((line) => console.error(line));
	await import(join(root, '.workers', 'worker.js'));
});
