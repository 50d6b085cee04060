import { defineConfig } from '@playwright/test';

/** Browser tests: the built application with its fakes on free ports, in the system's Chromium. */
export default defineConfig({
	testDir: 'tests/e2e',
	outputDir: 'test-results',
	globalSetup: './tests/e2e/support/globalSetup.ts',
	// The tests share one application and tell stories in it: one at a time, each tried once.
	workers: 1,
	fullyParallel: false,
	retries: 0,
	forbidOnly: Boolean(process.env.CI),
	timeout: 90_000,
	expect: { timeout: 10_000 },
	reporter: 'list',
	use: {
		// Set by the global set-up, which runs before the workers read this file.
		baseURL: process.env.DUSKLINE_E2E_ORIGIN,
		locale: 'en-GB',
		timezoneId: 'Europe/Vienna',
		trace: 'retain-on-failure',
		screenshot: 'only-on-failure',
		launchOptions: {
			executablePath: process.env.DUSKLINE_CHROMIUM ?? '/usr/bin/chromium',
			chromiumSandbox: process.getuid?.() !== 0,
			args: ['--disable-background-networking', '--disable-component-update', '--disable-sync']
		}
	}
});
