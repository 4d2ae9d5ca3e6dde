import { defineConfig } from '@playwright/test';

/**
 * The built server is tested, not the development server, on a fresh demonstration folder: `npm run build`
 * first (the test command does). Order of starting: global setup removes the old folder, then the web server
 * fills a new one and answers /api/v1/health, then the tests run one after the other against it.
 */
const port = Number(process.env.TEST_PORT ?? 4319);
export const origin = `http://127.0.0.1:${port}`;

export default defineConfig({
	testDir: '.',
	testMatch: '*.e2e.ts',
	outputDir: './results',
	fullyParallel: false,
	workers: 1,
	retries: 0,
	forbidOnly: Boolean(process.env.CI),
	timeout: 45_000,
	expect: { timeout: 10_000 },
	reporter: process.env.PLAYWRIGHT_JSON_OUTPUT_NAME ? [['list'], ['json']] : [['list']],
	use: {
		baseURL: origin,
		timezoneId: 'Europe/Paris',
		locale: 'en-GB',
		viewport: { width: 1280, height: 900 },
		screenshot: 'only-on-failure',
		launchOptions: {
			executablePath: process.env.CHROMIUM_PATH ?? '/usr/bin/chromium',
			args: [
				'--no-sandbox',
				'--disable-gpu',
				'--disable-quic',
				'--no-first-run',
				'--disable-background-networking',
				'--disable-component-update',
				'--disable-sync'
			]
		}
	},
	webServer: {
		command: 'node tests/browser/start-server.mjs',
		cwd: '../..',
		url: `${origin}/api/v1/health`,
		timeout: 180_000,
		reuseExistingServer: false,
		gracefulShutdown: { signal: 'SIGTERM', timeout: 10_000 },
		env: { PORT: String(port), HOST: '127.0.0.1', ORIGIN: origin, MAX_UPLOAD_MB: '16' }
	}
});
