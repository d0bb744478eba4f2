import { expect, test } from '@playwright/test';
import { addCell, newNote, signIn } from '../support/browser';
import { shoot } from '../support/screens';

test('a person looks back at a note, sees figures and authors of then, restores it and takes that back', async ({
	page,
}) => {
	await signIn(page, 'engineer');
	const path = await newNote(page, 'Looked back at');
	await addCell(page, 'calculation', 'a = 2 V');
	await expect(page.locator('[data-saving]')).toHaveText(/^Saved \d\d:\d\d$/);
	await expect(page.locator('[data-quantity=a]').first()).toContainText('2');

	await page.getByRole('link', { name: 'History' }).click();
	await expect(page).toHaveURL(`${path}/history`);
	const sheet = page.getByRole('article', { name: 'What the note said then' });
	await expect(sheet).toContainText('a');
	await expect(page.getByText(/^As it is now/)).toBeVisible();
	const sessions = page.getByRole('navigation', { name: 'Sessions of work' }).getByRole('listitem');
	await expect(sessions).toHaveCount(1);
	await expect(sessions).toContainText('edits · cell');
	// The newest moment is there already: nothing to bring back.
	await expect(page.getByRole('button', { name: 'Restore this moment' })).toHaveCount(0);

	// The session's first edit made the note, when it had no calculation.
	const within = page.getByRole('slider', { name: 'Within the session' });
	await within.focus();
	await within.press('Home');
	await expect(page).toHaveURL(/\?at=1$/);
	await expect(page.getByText(/^As it was/)).toBeVisible();
	await expect(sheet.locator('[data-kind=calculation]')).toHaveCount(0);
	await expect(sheet.locator('.author').first()).toContainText('changed in this session');
	await shoot(page, 'history');

	await page.getByRole('button', { name: 'Restore this moment' }).click();
	await expect(page).toHaveURL(new RegExp(`${path}$`));
	await expect(page.getByText(/^Restored as of/)).toBeVisible();
	await expect(page.locator('[data-kind=calculation]')).toHaveCount(0);
	await expect(page.locator('[data-saving]')).toHaveText(/^Saved \d\d:\d\d$/);

	await page.keyboard.press('ControlOrMeta+z');
	await expect(page.locator('[data-kind=calculation]')).toHaveCount(1);
	await expect(page.locator('[data-saving]')).toHaveText(/^Saved \d\d:\d\d$/);
	// Loading the page again restores nothing.
	await page.reload();
	await expect(page.locator('[data-kind=calculation]')).toHaveCount(1);
	await expect(page.locator('[data-quantity=a]').first()).toContainText('2');
});

test('a reader is shown no history', async ({ page }) => {
	await signIn(page, 'engineer');
	const path = await newNote(page, 'Not for readers');
	await page.getByRole('button', { name: /: menu$/ }).click();
	await page.getByRole('button', { name: 'Sign out' }).click();
	await expect(page).toHaveURL(/\/sign-in/);
	await signIn(page, 'reader');
	const answer = await page.goto(`${path}/history`);
	expect(answer?.status()).toBe(403);
	await expect(page.locator('body')).not.toContainText('Not for readers');
});
