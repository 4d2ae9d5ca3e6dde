import AxeBuilder from '@axe-core/playwright';
import { expect, test, type Browser, type Page } from '@playwright/test';
import { signedIn } from './people';

const PLACES = [
	'/',
	'/incidents',
	'/incidents?q=nothing+resembles+this+at+all',
	'/incidents/new',
	'/incidents/77',
	'/incidents/44',
	'/runbooks',
	'/runbooks/refresh-statistics-of-one-table',
	'/symptoms',
	'/symptoms/hash-spill',
	'/gauge',
	'/search?q=invoice',
	'/account',
	'/people',
	'/settings',
	'/audit',
	'/outbox',
	'/gauge?compare',
	'/no-such-place'
];

const STANDARDS = ['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa', 'best-practice'];

/** What axe finds on the page as it stands, each with where. By night only the colours differ. */
async function findViolations(page: Page, place: string, coloursOnly = false): Promise<string[]> {
	const axe = new AxeBuilder({ page });
	const { violations } = await (
		coloursOnly ? axe.withRules(['color-contrast', 'link-in-text-block']) : axe.withTags(STANDARDS)
	).analyze();
	return violations.map(
		({ id, nodes }) => `${place}: ${id}: ${nodes.map((node) => node.target.join(' ')).join(', ')}`
	);
}

/** Width of what the page holds: over the window's, it scrolls sideways. */
function widthOf(page: Page): Promise<number> {
	return page.evaluate(() => document.documentElement.scrollWidth);
}

async function walk(browser: Browser, width: number, colorScheme: 'light' | 'dark'): Promise<void> {
	const { context, page } = await signedIn(browser, 'administrator', {
		viewport: { width, height: 900 },
		colorScheme
	});
	const said: string[] = [];
	const refused: string[] = [];
	page.on('console', (message) => {
		if (/content security policy/i.test(message.text())) refused.push(message.text());
	});
	for (const place of PLACES) {
		await page.goto(place);
		await expect(page.getByRole('heading', { level: 1 })).toHaveCount(1);
		said.push(
			...(await findViolations(page, `${place} at ${width} px, ${colorScheme}`, colorScheme === 'dark'))
		);
		expect(await widthOf(page), `${place} at ${width} px scrolls sideways`).toBeLessThanOrEqual(width);
	}
	expect(said).toEqual([]);
	expect(refused).toEqual([]);
	await context.close();
}

test.describe('every place is accessible', () => {
	test.setTimeout(180_000);
	test('by day on a laptop', ({ browser }) => walk(browser, 1280, 'light'));
	test('by night on a laptop', ({ browser }) => walk(browser, 1280, 'dark'));
	test('by day on a telephone', ({ browser }) => walk(browser, 390, 'light'));
	test('by night on a telephone', ({ browser }) => walk(browser, 390, 'dark'));
});

test('the sign-in page is accessible, by day and by night', async ({ page }) => {
	for (const colorScheme of ['light', 'dark'] as const) {
		await page.emulateMedia({ colorScheme });
		await page.goto('/sign-in');
		expect(await findViolations(page, `sign-in, ${colorScheme}`)).toEqual([]);
	}
});

test('nothing scrolls sideways at 320 px, nor leaves half of a wide screen to one line', async ({
	browser
}) => {
	test.setTimeout(120_000);
	const { context, page } = await signedIn(browser, 'administrator', {
		viewport: { width: 320, height: 720 }
	});
	for (const place of PLACES) {
		await page.goto(place);
		expect(await widthOf(page), place).toBeLessThanOrEqual(320);
	}
	await page.setViewportSize({ width: 1920, height: 1080 });
	for (const place of PLACES) {
		await page.goto(place);
		expect(await widthOf(page), place).toBeLessThanOrEqual(1920);
	}
	await context.close();
});

test('the places are reached by keyboard alone, the skip link first', async ({ browser }) => {
	const { context, page } = await signedIn(browser, 'responder');
	await page.goto('/incidents');
	await page.keyboard.press('Tab');
	await expect(page.locator(':focus')).toHaveText(/skip/i);
	await page.keyboard.press('Enter');
	await expect(page.locator(':focus')).toHaveAttribute('id', /.+/);
	await page.keyboard.press('Control+k');
	await expect(page.getByRole('combobox')).toBeFocused();
	await page.keyboard.type('hash spill');
	await expect(page.getByRole('option').first()).toBeVisible();
	await page.keyboard.press('ArrowDown');
	await page.keyboard.press('Enter');
	await page.waitForURL((url) => url.pathname !== '/incidents');
	await context.close();
});
