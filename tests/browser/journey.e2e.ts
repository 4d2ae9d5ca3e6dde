import { expect, test } from '@playwright/test';
import { signIn } from './people';

const UPLOADS = 'tests/fixtures/uploads';
const TITLE = 'Invoice preview of the fourth subsidiary spins';

test('an engineer on call logs an incident, finds the precedent, follows the runbook, records the outcome and finds it again', async ({
	page
}) => {
	await signIn(page, 'responder');
	await page.getByRole('link', { name: 'Log an incident' }).click();
	await expect(page.getByRole('heading', { name: 'Log an incident' })).toBeVisible();

	// Evidence first: the form fills itself and says from where.
	await page.getByLabel('choose files').setInputFiles([`${UPLOADS}/plan.json`, `${UPLOADS}/server.log`]);
	const title = page.getByLabel('What is wrong?');
	await expect(title).toHaveValue(/invoice_line/);
	await expect(page.getByText(/from plan\.json/).first()).toBeVisible();
	await expect(page.getByLabel('Engine')).toHaveValue('postgresql');
	await expect(page.getByText(/hash spill/i).first()).toBeVisible();
	const beside = page.getByRole('complementary');
	await expect(beside.getByRole('link', { name: /Staged lines preview spills after load/ })).toBeVisible();
	await expect(beside.getByText(/same statement/).first()).toBeVisible();

	await title.fill(TITLE);
	await page.getByRole('radio', { name: /2 hurts now/ }).check({ force: true });
	await page.getByLabel('What do you see?').fill('Disk busy with writes, odd for a `SELECT`.');
	await page.getByRole('button', { name: 'Log it' }).click();

	// The incident: where it overflows, in a sentence, with its figures.
	await page.waitForURL(/\/incidents\/\d+$/);
	const number = page.url().split('/').at(-1) ?? '';
	await expect(page.getByRole('heading', { level: 1, name: TITLE })).toBeVisible();
	await expect(page.getByText(/The estimate goes wrong at/).first()).toContainText('invoice_line');
	await expect(page.getByRole('figure', { name: /drift trail/i }).first()).toBeVisible();
	const ledger = page.getByRole('treegrid', { name: 'Operators' });
	await expect(ledger.getByRole('row').nth(1)).toBeVisible();
	await expect(page.getByText('450,300').first()).toBeVisible();
	await expect(page.getByText('state = ?').first()).toBeAttached();

	await page.getByRole('button', { name: 'Take it' }).click();
	await expect(page.getByText(/on it:/)).toContainText('Tomas Rehl');
	await page
		.getByRole('textbox', { name: 'Add to the log' })
		.fill('Loader finished at 00:31, no analyze since.');
	await page.getByRole('button', { name: 'Add to the log' }).click();
	await expect(page.getByText('Loader finished at 00:31')).toBeVisible();

	// The runbook that ended it the last times, with its record.
	await expect(beside.getByRole('link', { name: /Staged lines preview spills after load/ })).toBeVisible();
	const runbook = beside.getByRole('listitem').filter({ hasText: 'Refresh statistics of one table' });
	const record = (await runbook.getByText(/worked \d+ of \d+/).textContent()) ?? '';
	const workedBefore = Number(/worked (\d+) of/.exec(record)?.[1]);
	expect(workedBefore).toBeGreaterThan(0);
	await beside.getByRole('button', { name: 'Follow Refresh statistics of one table' }).click();

	await page.waitForURL(/\/follow/);
	for (let step = 0; step < 12; step++) {
		if (await page.getByRole('heading', { name: 'What came of it?' }).isVisible()) break;
		const heading = await page.getByRole('heading', { level: 1 }).textContent();
		for (const box of await page.getByRole('checkbox').all()) await box.check();
		const notNeeded = page.getByRole('button', { name: 'Not needed, next' });
		if (await notNeeded.isVisible()) await notNeeded.click();
		else await page.getByRole('button', { name: 'Done, next' }).click();
		await expect(page.getByRole('heading', { level: 1 })).not.toHaveText(heading ?? '');
	}
	await page.getByRole('radio', { name: 'It worked' }).check();
	await page.getByLabel('What did you see?').fill('Estimate is right again, preview back in two minutes.');
	await page.getByRole('button', { name: 'Record the outcome' }).click();
	await expect(page.getByRole('heading', { name: 'It worked' })).toBeVisible();

	await page.goto('/runbooks/refresh-statistics-of-one-table');
	await expect(page.getByText(new RegExp(`worked ${workedBefore + 1} of`, 'i')).first()).toBeVisible();

	// What ended it, then found again by search.
	await page.goto(`/incidents/${number}`);
	await page.getByText('Resolved…').click();
	await page.getByRole('combobox', { name: 'Cause', exact: true }).selectOption('stale-statistics');
	await page
		.getByRole('textbox', { name: 'What ended it?' })
		.fill('ANALYZE invoice_line after the bulk load.');
	await page.getByRole('button', { name: 'Resolved', exact: true }).click();
	await expect(page.getByRole('heading', { name: 'What ended it' })).toBeVisible();

	await page.keyboard.press('/');
	await page.keyboard.type('fourth subsidary');
	const option = page.getByRole('option', { name: new RegExp(TITLE) });
	await expect(option).toBeVisible();
	await option.click();
	await page.waitForURL(new RegExp(`/incidents/${number}`));
});
