import { fileURLToPath } from 'node:url';
import { defineConfig } from 'vite';

/* The worker process and the programs run beside it, built apart from the web server: adapter-node empties build/. */
export default defineConfig({
	resolve: { alias: { $lib: fileURLToPath(new URL('./src/lib', import.meta.url)) } },
	publicDir: false,
	build: {
		ssr: true,
		outDir: '.workers',
		emptyOutDir: true,
		target: 'node20',
		rolldownOptions: {
			input: {
				worker: 'src/worker/main.ts',
				'compute-thread': 'src/worker/compute-thread.ts',
				migrate: 'src/worker/migrate.ts',
				catalogue: 'src/worker/catalogue.ts',
				demo: 'src/worker/demo.ts'
			},
			output: { entryFileNames: '[name].js' }
		}
	}
});
