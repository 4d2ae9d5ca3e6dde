import { mkdtempSync, readFileSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { expect, test } from '@playwright/test';
import { signedIn, signIn } from './people';

const PLAN = readFileSync('tests/fixtures/uploads/plan.json', 'utf8');

test('an empty file, a photo renamed .json and a plan cut in half get a clear word and lose nothing', async ({
	page
}) => {
	await signIn(page, 'responder');
	await page.goto('/incidents/new');
	await page.getByLabel('What is wrong?').fill('<img src=x onerror=alert(1)> & "quoted"');
	await page.getByLabel('choose files').setInputFiles([
		{ name: 'empty.txt', mimeType: 'text/plain', buffer: Buffer.alloc(0) },
		{
			name: 'photo.json',
			mimeType: 'application/json',
			buffer: Buffer.concat([
				Buffer.from([0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a]),
				Buffer.alloc(400, 7)
			])
		},
		{ name: 'half.json', mimeType: 'application/json', buffer: Buffer.from(PLAN.slice(0, PLAN.length / 2)) }
	]);
	await expect(page.getByText(/empty/i).nth(1)).toBeVisible();
	let scripts = 0;
	page.on('dialog', () => scripts++);
	await page.getByRole('button', { name: 'Log it' }).click();
	await page.waitForURL(/\/incidents\/\d+$/);
	await expect(page.getByRole('heading', { level: 1 })).toHaveText('<img src=x onerror=alert(1)> & "quoted"');
	await expect(page.getByText('half.json').first()).toBeVisible();
	await expect(page.getByText('photo.json').first()).toBeVisible();
	await expect(page.getByText(/picture/i).first()).toBeVisible();
	expect(scripts).toBe(0);
});

test('a file over the limit is refused before it is read, and what was typed stays', async ({ page }) => {
	await signIn(page, 'responder');
	await page.goto('/incidents/new');
	await page.getByLabel('What is wrong?').fill('A log of seventeen megabytes');
	const path = join(mkdtempSync(join(tmpdir(), 'catchwater-large-')), 'large.log');
	const line = '2026-11-30 23:00:00.000 UTC [77] LOG:  connection received: host=127.0.0.1 port=41430\n';
	writeFileSync(path, Buffer.alloc(17 * 1024 * 1024, line));
	await page.getByLabel('choose files').setInputFiles(path);
	await page.getByRole('button', { name: 'Log it' }).click();
	await expect(page.getByText('It was not logged')).toBeVisible({ timeout: 30_000 });
	await expect(page.getByText(/16 MB/).first()).toBeVisible();
	await expect(page.getByLabel('What is wrong?')).toHaveValue('A log of seventeen megabytes');
});

test('a stale edit overwrites nothing and shows both texts', async ({ browser }) => {
	const one = await signedIn(browser, 'responder');
	const two = await signedIn(browser, 'curator');
	for (const { page } of [one, two]) {
		await page.goto('/incidents/76');
		await page.getByText('Edit', { exact: true }).click();
	}
	await one.page.getByLabel('What is wrong').fill('Yard map flickers, said first');
	await one.page.getByRole('button', { name: 'Save', exact: false }).first().click();
	await expect(one.page.getByRole('heading', { level: 1 })).toHaveText(/said first/);
	await two.page.getByLabel('What is wrong').fill('Yard map flickers, said second');
	await two.page.getByRole('button', { name: 'Save', exact: false }).first().click();
	await expect(two.page.getByText(/said first/).first()).toBeVisible();
	await expect(two.page.getByLabel('What is wrong')).toHaveValue('Yard map flickers, said second');
	await one.context.close();
	await two.context.close();
});

test("a stranger's session is sent to the sign-in page, and comes back to where they were going", async ({
	page,
	context
}) => {
	await context.addCookies([
		{ name: 'catchwater_session', value: 'a'.repeat(40), domain: '127.0.0.1', path: '/' }
	]);
	await page.goto('/incidents/44');
	await expect(page.getByRole('heading', { name: /sign in/i })).toBeVisible();
	await expect(page.getByText(/Quote comparison/)).toHaveCount(0);
	await page.getByLabel('E-mail').fill('nobody@northmoor.example');
	await page.getByLabel('Password').fill('not the password');
	await page.getByRole('button', { name: 'Sign in' }).click();
	await expect(page.getByRole('alert')).toBeVisible();
	await expect(page.getByLabel('E-mail')).toHaveValue('nobody@northmoor.example');
});

test('a reader sees everything and is offered nothing that a responder does', async ({ browser }) => {
	const { context, page } = await signedIn(browser, 'reader');
	await page.goto('/incidents/77');
	await expect(page.getByRole('heading', { level: 1 })).toBeVisible();
	for (const name of ['Take it', 'Add to the log', 'Log an incident'])
		await expect(page.getByRole('button', { name })).toHaveCount(0);
	await page.goto('/incidents/new');
	await expect(page.getByRole('heading', { level: 1 })).not.toHaveText('Log an incident');
	await context.close();
});
