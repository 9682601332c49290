import { fileURLToPath } from 'node:url';
import { defineConfig } from 'vite';

/* The worker process and its threads, built apart from the web server: adapter-node empties build/ each time. */
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
				worker: 'src/worker/main.ts'
			},
			output: { entryFileNames: '[name].js' }
		}
	}
});
