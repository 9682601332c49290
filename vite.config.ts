import { sveltekit } from '@sveltejs/kit/vite';
import tailwindcss from '@tailwindcss/vite';
import { svelteTesting } from '@testing-library/svelte/vite';
import { defineConfig } from 'vitest/config';

export default defineConfig({
	plugins: [tailwindcss(), sveltekit()],
	server: { host: '127.0.0.1' },
	// A small font inlined as a data: address would be refused by the content security policy.
	build: { assetsInlineLimit: 0 },
	test: {
		projects: [
			{
				extends: './vite.config.ts',
				test: {
					name: 'unit',
					environment: 'node',
					include: [
						'src/**/*.test.ts',
						'report-templates/**/*.test.ts',
						'tests/published/**/*.test.ts',
						'tests/docs/**/*.test.ts',
						'tests/permissions/route-tree.test.ts',
						'stripe-fake/**/*.test.ts'
					],
					exclude: ['src/**/*.db.test.ts', 'src/**/*.svelte.test.ts']
				}
			},
			{
				extends: './vite.config.ts',
				test: {
					name: 'integration',
					environment: 'node',
					include: ['src/**/*.db.test.ts', 'tests/integration/**/*.test.ts'],
					testTimeout: 60_000,
					hookTimeout: 120_000
				}
			},
			{
				extends: './vite.config.ts',
				test: {
					name: 'permissions',
					environment: 'node',
					include: ['tests/permissions/matrix.test.ts']
				}
			},
			{
				extends: './vite.config.ts',
				plugins: [svelteTesting()],
				test: {
					name: 'components',
					environment: 'jsdom',
					include: ['src/**/*.svelte.test.ts']
				}
			}
		]
	}
});
