import { expect, type BrowserContext, type Page } from '@playwright/test';

/** Password of every account of the demonstration. */
export const demoPassword = 'halfdigit-demo-2026';

type DemoAccount = 'reader' | 'engineer' | 'peer' | 'approver' | 'administrator';

export function emailOf(account: DemoAccount): string {
	return `${account}@alderfen.example`;
}

type Cookies = Parameters<BrowserContext['addCookies']>[0];

/** Sessions that earlier tests of this run began, by account. */
const begun = new Map<DemoAccount, Cookies>();

/**
 * Opens the list of notes as a demonstration account: in the session that an earlier test began, where there is one that
 * still holds, else by signing in through the page.
 */
export async function signIn(page: Page, account: DemoAccount): Promise<void> {
	await page.context().addCookies(begun.get(account) ?? []);
	await page.goto('/notes');
	if (new URL(page.url()).pathname !== '/notes') await signInAnew(page, account);
	await expect(page.getByRole('heading', { name: 'Notes', level: 1 })).toBeVisible();
	begun.set(account, await page.context().cookies());
}

/** Signs a demonstration account in through the page, which begins a session of its own. */
async function signInAnew(page: Page, account: DemoAccount): Promise<void> {
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

/** Opens a note's sheet and waits until it can be worked with: its scripts come behind its figures. */
export async function openNote(page: Page, path: string): Promise<void> {
	await page.goto(path);
	await expect(page.locator('[data-connection=online]')).toBeVisible();
}
