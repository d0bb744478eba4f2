import { chromium as browsers, type Browser, type BrowserContext } from '@playwright/test';
import { chromium } from '../../server/local/debian.mjs';

/** Somebody who can sign in. */
interface Account {
	email: string;
	password: string;
}

export function openBrowser(): Promise<Browser> {
	return browsers.launch({
		executablePath: chromium,
		args: ['--no-sandbox', '--disable-gpu', '--disable-quic', '--no-first-run'],
	});
}

/** A browser context of its own in which this person has signed in. */
export async function signIn(
	browser: Browser,
	url: string,
	account: Account,
): Promise<BrowserContext> {
	const context = await browser.newContext({
		baseURL: url,
		viewport: { width: 1400, height: 1000 },
	});
	const page = await context.newPage();
	await page.goto('/sign-in');
	await page.locator('input[name="email"]').fill(account.email);
	await page.locator('input[name="password"]').fill(account.password);
	await page.locator('input[name="password"]').press('Enter');
	await page.waitForURL('**/notes');
	await page.close();
	return context;
}
