import type { Browser, Page } from '@playwright/test';

/** The demonstration's sign-ins, one for each role, as `npm run demo` prints them. */
export const SIGN_INS = {
	reader: 'davit.oresen@northmoor.example',
	responder: 'tomas.rehl@northmoor.example',
	curator: 'ilse.marten@northmoor.example',
	administrator: 'anke.vossberg@northmoor.example'
} as const;
export type RoleName = keyof typeof SIGN_INS;
export const PASSWORD = 'ebb and flood at Northmoor';

/** Signs in as a person would and waits for Watch. */
export async function signIn(page: Page, role: RoleName): Promise<void> {
	await page.goto('/sign-in');
	await page.getByLabel('E-mail').fill(SIGN_INS[role]);
	await page.getByLabel('Password').fill(PASSWORD);
	await page.getByRole('button', { name: 'Sign in' }).click();
	await page.waitForURL((url) => url.pathname === '/');
}

/** The cookies of somebody signed in, so that a file signs in once per role and not once per test. */
export async function signedIn(browser: Browser, role: RoleName, options: Record<string, unknown> = {}) {
	const context = await browser.newContext(options);
	const page = await context.newPage();
	await signIn(page, role);
	return { context, page };
}
