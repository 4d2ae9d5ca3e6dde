/**
 * Makes README's pictures from the demonstration: `npm run build && npm run tour` writes content/tour.
 */
import { mkdirSync, mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { chromium, type Browser, type Page } from '@playwright/test';
import { signIn } from './people';
import { serve, stop } from './served';

const INTO = 'content/tour';
const UPLOADS = 'tests/fixtures/uploads';

interface Picture {
	name: string;
	width: number;
	height: number;
	night?: boolean;
	go: (page: Page) => Promise<void>;
}

/** The incident of the demonstration with the longest story: open, with plan and log, an attempt under way. */
const INCIDENT = '/incidents/77';

const PICTURES: Picture[] = [
	{
		name: 'new-1280',
		width: 1280,
		height: 1000,
		async go(page) {
			await page.goto('/incidents/new');
			await page.getByLabel('choose files').setInputFiles([`${UPLOADS}/plan.json`, `${UPLOADS}/server.log`]);
			await page.getByRole('complementary').getByRole('link').first().waitFor();
		}
	},
	{ name: 'incident-1280', width: 1280, height: 1500, go: (page) => visit(page, INCIDENT) },
	{
		name: 'incident-1280-night',
		width: 1280,
		height: 1000,
		night: true,
		go: (page) => visit(page, INCIDENT)
	},
	{ name: 'incident-390', width: 390, height: 1500, go: (page) => visit(page, INCIDENT) },
	{
		name: 'follow-390',
		width: 390,
		height: 900,
		async go(page) {
			await page.goto(INCIDENT);
			await page
				.getByRole('link', { name: /step \d of \d/i })
				.or(page.getByRole('link', { name: /follow/i }))
				.last()
				.click();
			await page.waitForURL(/follow/);
		}
	},
	{
		name: 'gauge-1280',
		width: 1280,
		height: 1300,
		async go(page) {
			await page.goto('/gauge');
			await page.getByLabel('choose files').first().setInputFiles(`${UPLOADS}/plan.json`);
			await page
				.getByText(/The estimate goes wrong/)
				.first()
				.waitFor();
		}
	}
];

async function visit(page: Page, path: string): Promise<void> {
	await page.goto(path);
}

async function take(browser: Browser, origin: string, picture: Picture): Promise<void> {
	const context = await browser.newContext({
		baseURL: origin,
		viewport: { width: picture.width, height: picture.height },
		colorScheme: picture.night ? 'dark' : 'light',
		timezoneId: 'Europe/Paris',
		locale: 'en-GB'
	});
	const page = await context.newPage();
	await signIn(page, 'responder');
	await picture.go(page);
	await page.evaluate(() => document.fonts.ready.then(() => window.scrollTo(0, 0)));
	await page.screenshot({ path: join(INTO, `${picture.name}.png`) });
	console.log(`${INTO}/${picture.name}.png`);
	await context.close();
}

const folder = mkdtempSync(join(tmpdir(), 'catchwater-tour-'));
mkdirSync(INTO, { recursive: true });
const served = await serve(folder, { demo: true });
const browser = await chromium.launch({
	executablePath: process.env.CHROMIUM_PATH ?? '/usr/bin/chromium',
	args: ['--no-sandbox', '--disable-gpu', '--disable-background-networking']
});
try {
	for (const picture of PICTURES) await take(browser, served.origin, picture);
} finally {
	await browser.close();
	await stop(served);
	rmSync(folder, { recursive: true, force: true });
}
