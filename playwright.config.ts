import { defineConfig } from '@playwright/test';
import { chromium } from './server/local/debian.mjs';
import { firstFree } from './server/local/ports.mjs';

// Every process of a run reads this file; the first one chooses the port for all.
process.env.BROWSER_TEST_PORT ??= String(await firstFree(4183));
const port = process.env.BROWSER_TEST_PORT;

export default defineConfig({
	testDir: 'tests/e2e',
	outputDir: 'test-results/browser',
	forbidOnly: true,
	// Who needed the second try is named in the output of the whole run.
	retries: 1,
	workers: 1,
	timeout: 90_000,
	expect: { timeout: 10_000 },
	reporter: [['line'], ['json', { outputFile: 'test-results/browser.json' }]],
	use: {
		baseURL: `http://localhost:${port}`,
		trace: 'retain-on-failure',
		actionTimeout: 30_000,
		launchOptions: {
			executablePath: chromium,
			args: [
				'--no-sandbox',
				'--disable-gpu',
				'--disable-quic',
				'--no-first-run',
				'--disable-background-networking',
				'--disable-component-update',
				'--disable-sync',
			],
		},
	},
	webServer: {
		command: `node server/local/serve-tests.mjs ${port}`,
		url: `http://localhost:${port}/sign-in`,
		timeout: 240_000,
		reuseExistingServer: false,
		gracefulShutdown: { signal: 'SIGTERM', timeout: 15_000 },
		stdout: 'pipe',
		stderr: 'pipe',
	},
});
