import { expect, type Page } from '@playwright/test';

/** Password of every account of the demonstration. */
export const demoPassword = 'halfdigit-demo-2026';

type DemoAccount = 'reader' | 'engineer' | 'peer' | 'approver' | 'administrator';

export function emailOf(account: DemoAccount): string {
	return `${account}@alderfen.example`;
}

/** Signs a demonstration account in through the page and waits for the list of notes. */
export async function signIn(page: Page, account: DemoAccount): Promise<void> {
	await page.goto('/sign-in');
	await page.getByLabel('E-mail').fill(emailOf(account));
	await page.getByLabel('Password').fill(demoPassword);
	await page.getByRole('button', { name: 'Sign in' }).click();
	await expect(page.getByRole('heading', { name: 'Notes', level: 1 })).toBeVisible();
}
