import { join } from 'node:path';
import { ensureWorkerBuild } from './lib/build.mjs';
import { root } from './lib/paths.mjs';
import { runScript } from './lib/plain-error.mjs';

/* Brings the database at DATABASE_URL up to this version; several may run at once. */
runScript(async () => {
	process.chdir(root);
	await ensureWorkerBuild((line) => console.error(line));
	await import(join(root, '.workers', 'migrate.js'));
});
