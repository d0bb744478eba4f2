import { expect, test, type Page } from '@playwright/test';
import { addCell, newNote, signIn } from '../support/browser';
import { shoot } from '../support/screens';

const cells = (page: Page) => page.locator('[data-cell]');
/** Kind and text of each cell. */
const sheet = (page: Page) =>
	cells(page).evaluateAll((all) =>
		all.map((cell) => {
			const lines = Array.from(cell.querySelectorAll('.cm-line, .prose p'));
			const text = lines.map((line) => line.firstChild?.textContent ?? '');
			return `${(cell as HTMLElement).dataset.kind?.slice(0, 4)}: ${text.length}`;
		}),
	);
const kinds = (page: Page) =>
	cells(page).evaluateAll((all) => all.map((cell) => (cell as HTMLElement).dataset.kind));
const focusedCell = (page: Page) =>
	page.evaluate(() => {
		const all = Array.from(document.querySelectorAll('[data-cell]'));
		return all.findIndex((cell) => cell.contains(document.activeElement)) + 1;
	});

test('everything about cells is done from the keyboard, and each action is one step to undo', async ({
	page,
}) => {
	await signIn(page, 'engineer');
	await newNote(page, 'Keys');
	await addCell(page, 'calculation', 'a = 1\nb = 2\nc = 3');
	await page.locator('.cm-line', { hasText: 'b =' }).click();
	const steps = [await sheet(page)];
	const press = async (keys: string, expected: string[]) => {
		await page.keyboard.press(keys);
		await expect.poll(() => sheet(page), { message: keys }).toEqual(expected);
		steps.push(expected);
	};
	await press('Alt+Shift+S', ['text: 0', 'calc: 1', 'calc: 2']);
	await expect.poll(() => focusedCell(page)).toBe(3);
	await press('Alt+Shift+PageUp', ['text: 0', 'calc: 2', 'calc: 1']);
	await expect.poll(() => focusedCell(page)).toBe(2);
	await press('Alt+Shift+J', ['text: 0', 'calc: 3']);
	await press('Alt+Shift+D', ['text: 0', 'calc: 3', 'calc: 3']);
	await press('Alt+Shift+Enter', ['text: 0', 'calc: 3', 'calc: 1', 'calc: 3']);
	await expect.poll(() => focusedCell(page)).toBe(3);
	await press('Alt+Shift+K', ['text: 0', 'calc: 3', 'requ: 1', 'calc: 3']);
	await press('Alt+Shift+H', ['text: 0', 'calc: 3', 'requ: 1', 'requ: 1', 'calc: 3']);
	await press('Alt+Shift+Delete', ['text: 0', 'calc: 3', 'requ: 1', 'calc: 3']);
	for (const before of steps.slice(0, -1).reverse()) {
		await page.keyboard.press('ControlOrMeta+z');
		await expect.poll(() => sheet(page)).toEqual(before);
	}

	await page.locator('.cm-line', { hasText: 'b =' }).click();
	await page.keyboard.press('Alt+Shift+F');
	await expect(page.getByRole('button', { name: 'a = 1 and 2 more' })).toBeVisible();
	await page.keyboard.press('Alt+PageUp');
	await expect.poll(() => focusedCell(page)).toBe(1);
	await page.keyboard.press('Alt+PageDown');
	await expect.poll(() => focusedCell(page)).toBe(2);
	await page.keyboard.press('Alt+Shift+F');
	await expect(page.locator('.cm-line', { hasText: 'c =' })).toBeVisible();
});

test('all actions are found by name with their keys, and the keys are listed', async ({ page }) => {
	await signIn(page, 'engineer');
	await newNote(page, 'Actions');
	await addCell(page, 'calculation', 'a = 1\nb = 2');
	await page.locator('.cm-line', { hasText: 'b =' }).click();
	await page.keyboard.press('Alt+Shift+X');
	const field = page.getByRole('combobox', { name: 'What to do' });
	await expect(field).toBeFocused();
	await expect(page.getByRole('option', { name: 'Rename it everywhere' })).toContainText(
		'Alt+Shift+N',
	);
	await shoot(page, 'actions', { whole: false });
	await field.fill('requirement below');
	await expect(page.locator('[role=option]')).toHaveCount(1);
	await page.keyboard.press('Enter');
	await expect.poll(() => kinds(page)).toEqual(['text', 'calculation', 'requirement']);
	await expect.poll(() => focusedCell(page)).toBe(3);

	await page.keyboard.type('?');
	await expect(page.getByRole('region', { name: 'Keys' })).toHaveCount(0);
	// The first may take back what is being offered.
	await expect(async () => {
		await page.keyboard.press('Escape');
		await expect(page.locator('.cm-focused')).toHaveCount(0, { timeout: 300 });
	}).toPass();
	await page.keyboard.press('?');
	const keys = page.getByRole('region', { name: 'Keys' });
	await expect(keys).toContainText('Go to the next cell');
	await expect(keys).toContainText('Alt+Page ↓');
	await shoot(page, 'keys', { whole: false });
	await page.keyboard.press('Escape');
	await expect(keys).toHaveCount(0);
	await page.getByRole('button', { name: 'Actions' }).click();
	await expect(field).toBeFocused();
	await page.keyboard.press('Escape');
	await expect(field).toHaveCount(0);
});
