/* Writes signed sample reports and pictures of their pages to samples/; needs no server and no database. */
import { fileURLToPath } from 'node:url';
import { createServer } from 'vite';

const root = fileURLToPath(new URL('..', import.meta.url));
const server = await createServer({
	configFile: false,
	root,
	logLevel: 'error',
	appType: 'custom',
	server: { middlewareMode: true, hmr: false, watch: null, ws: false },
	resolve: { alias: { $lib: `${root}src/lib` } },
	optimizeDeps: { noDiscovery: true }
});
try {
	const { writeSamples } = await server.ssrLoadModule('/scripts/lib/write-samples.ts');
	for (const line of await writeSamples(`${root}samples`, process.argv.slice(2))) console.log(line);
} catch (error) {
	console.error(error instanceof Error ? error.message : error);
	process.exitCode = 1;
} finally {
	await server.close();
}
