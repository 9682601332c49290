import { defineConfig } from '@playwright/test';
import { browserLaunch } from './scripts/lib/browser.mjs';

/* `npm test -- browser` starts the whole service and says here where it is. */
const address = process.env.E2E_ADDRESS;
if (address === undefined) throw new Error('The browser tests need a running service: npm test -- browser');

export default defineConfig({
	testDir: 'tests/e2e',
	testMatch: '**/*.spec.ts',
	outputDir: 'test-results',
	// One service and one database for all: tests keep to data of their own.
	fullyParallel: false,
	workers: 2,
	retries: 0,
	forbidOnly: true,
	timeout: 180_000,
	// Before the whole stage is ended, so that what ran is counted.
	globalTimeout: 40 * 60_000,
	expect: { timeout: 15_000 },
	use: {
		baseURL: address,
		actionTimeout: 15_000,
		locale: 'en-GB',
		timezoneId: 'UTC',
		screenshot: 'only-on-failure',
		trace: 'retain-on-failure',
		launchOptions: browserLaunch
	}
});
