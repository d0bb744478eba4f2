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

/** Makes a note and opens it; it has one text cell. Gives its path. */
export async function newNote(page: Page, title: string): Promise<string> {
	await page.getByRole('button', { name: 'New note' }).click();
	await page.getByLabel('Title').fill(title);
	await page.getByRole('button', { name: 'Create note' }).click();
	await expect(page).toHaveURL(/\/notes\/[A-Z]+-\d+$/);
	return new URL(page.url()).pathname;
}

/** Adds a cell at the end of the sheet, with its source. */
export async function addCell(
	page: Page,
	kind: 'text' | 'calculation' | 'requirement' | 'curve',
	source: string,
): Promise<void> {
	await page.getByRole('button', { name: kind, exact: true }).click();
	await expect(page.locator(`[data-kind=${kind}] .cm-focused`)).toBeVisible();
	await page.keyboard.insertText(source);
	await page.keyboard.press('Escape');
}

/** The readout of a quantity on its line. */
export const figure = (page: Page, name: string) =>
	page.locator(`[data-cell] [data-quantity="${name}"]`).first();
