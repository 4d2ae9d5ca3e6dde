import { expect, test } from '@playwright/test';
import { signIn } from './people';

test.use({ javaScriptEnabled: false });

test('a browser without JavaScript signs in, logs with evidence, adds to the log, searches and ticks a step', async ({
	page
}) => {
	await signIn(page, 'responder');
	await page.goto('/incidents/new');
	// A refusal first: nothing that was typed is lost.
	await page.getByLabel('What do you see?').fill('Typed before the title was.');
	await page.getByRole('button', { name: 'Log it' }).click();
	await expect(page.getByText('It was not logged')).toBeVisible();
	await expect(page.getByLabel('What do you see?')).toHaveValue('Typed before the title was.');

	await page.getByLabel('What is wrong?').fill('Preview logged by a plain browser');
	await page.locator('input[type=file]').setInputFiles('tests/fixtures/uploads/plan.pasted.txt');
	await page.getByRole('button', { name: 'Log it' }).click();
	await page.waitForURL(/\/incidents\/\d+$/);
	const address = page.url();
	await expect(page.getByRole('heading', { level: 1 })).toHaveText(/plain browser/);
	await expect(page.getByText(/The estimate goes wrong at/).first()).toBeVisible();
	await expect(page.getByRole('paragraph').filter({ hasText: 'Typed before the title was.' })).toBeVisible();

	await page.getByRole('textbox', { name: 'Add to the log' }).fill('Said without a script.');
	await page.getByRole('button', { name: 'Add to the log' }).click();
	await expect(page.getByRole('paragraph').filter({ hasText: 'Said without a script.' })).toBeVisible();

	await page.getByRole('button', { name: 'Follow Refresh statistics of one table' }).click();
	await page.waitForURL(/\/follow/);
	const first = await page.getByRole('heading', { level: 1 }).textContent();
	for (const box of await page.getByRole('checkbox').all()) await box.check();
	await page.getByRole('button', { name: 'Done, next' }).click();
	await expect(page.getByRole('heading', { level: 1 })).not.toHaveText(first ?? '');

	await page.goto('/search?q=plain+browser');
	await page.getByRole('link', { name: /Preview logged by a plain browser/ }).click();
	expect(page.url()).toBe(address);
});

test('the Gauge reads a pasted plan on the server where the browser runs no script', async ({ page }) => {
	await signIn(page, 'reader');
	await page.goto('/gauge');
	await page
		.getByLabel('Or paste one here')

		.fill(
			'Sort  (cost=1.00..2.00 rows=10 width=8) (actual time=0.1..9.0 rows=50000 loops=1)\n  Sort Key: a\n  Sort Method: external merge  Disk: 11392kB\n  ->  Seq Scan on lane  (cost=0.00..1.00 rows=10 width=8) (actual time=0.1..2.0 rows=50000 loops=1)\n'
		);
	await page.getByRole('button', { name: /read/i }).click();
	await expect(page.getByText(/sort spill/i).first()).toBeVisible();
});
