import { expect, test, type Page } from '@playwright/test';
import { addCell, figure, newNote, signIn } from '../support/browser';

const panel = (page: Page) => page.getByRole('region', { name: 'Find a divider', exact: true });
const field = (page: Page, name: string) => panel(page).getByLabel(name, { exact: true });
const results = (page: Page) => panel(page).getByRole('table');

async function open(page: Page, title: string): Promise<void> {
	await signIn(page, 'engineer');
	await newNote(page, title);
	await addCell(page, 'calculation', 'R_1 = 1 kohm');
	await expect(figure(page, 'R_1')).toHaveText(/1\s*kΩ/);
	await page.getByRole('button', { name: 'find a divider' }).click();
	await expect(field(page, 'Input')).toBeFocused();
}

async function ask(page: Page, wishes: Record<string, string>): Promise<void> {
	for (const [name, value] of Object.entries(wishes)) await field(page, name).fill(value);
	await page.keyboard.press('Enter');
}

test('a divider is found, sorted and written into the note in one step', async ({ page }) => {
	await open(page, 'Search');
	await ask(page, { Input: '32 V', Output: '2.4 V', 'Current to': '100 uA' });
	const rows = results(page).getByRole('row');
	await expect(rows).toHaveCount(21);
	const errors = results(page).getByRole('columnheader', { name: 'Error' });
	await expect(errors).toHaveAttribute('aria-sort', 'ascending');
	const currents = results(page).getByRole('columnheader', { name: 'Current' });
	await currents.getByRole('button').click();
	await expect(currents).toHaveAttribute('aria-sort', 'ascending');
	await expect(errors).not.toHaveAttribute('aria-sort');
	const column = await rows.locator('td:nth-child(6)').allInnerTexts();
	const values = column.map(parseFloat);
	expect(values).toEqual([...values].sort((a, b) => a - b));
	expect(values.every((value) => value <= 100)).toBe(true);

	const cells = page.locator('[data-cell]');
	await expect(cells).toHaveCount(2);
	await rows
		.nth(1)
		.getByRole('button', { name: /^Write / })
		.focus();
	await page.keyboard.press('Enter');
	await expect(panel(page)).toHaveCount(0);
	await expect(cells).toHaveCount(3);
	await expect(cells.nth(2).locator('.cm-content')).toBeFocused();
	// R_1 was taken.
	await expect(figure(page, 'R_2')).toHaveText(/±.*Ω$/);
	await expect(figure(page, 'V_out')).toHaveText(/^2\.\d+\s*±\s*0\.\d+\s*V$/);
	await expect(figure(page, 'k_div')).toHaveText(/^0\.07/);
	await expect(page.locator('[data-fault]')).toHaveCount(0);
	await page.keyboard.press('ControlOrMeta+z');
	await expect(cells).toHaveCount(2);
	await expect(figure(page, 'R_1')).toHaveText(/1\s*kΩ/);
});

test('wishes that cannot be read are named, those that cannot be met are answered', async ({
	page,
}) => {
	await open(page, 'Wishes');
	await ask(page, { Input: '', Output: 'two' });
	await expect(panel(page)).toContainText('Type it as in 32 V.');
	await expect(field(page, 'Input')).toBeFocused();
	await expect(field(page, 'Input')).toHaveAccessibleDescription('Type it as in 32 V.');
	await expect(field(page, 'Output')).toHaveAttribute('aria-invalid', 'true');
	await ask(page, { Input: '3 V', Output: '4 V' });
	await expect(panel(page).getByRole('status')).toContainText('less than its input');
	await ask(page, { Input: '32 V', Output: '2.4 V', 'Current to': '1 nA' });
	await expect(panel(page).getByRole('status')).toContainText('Loosen a limit');
	await expect(panel(page).getByRole('note')).toHaveCount(0);
	await field(page, 'Input').fill('61 V');
	await expect(panel(page).getByRole('note')).toContainText('60 V DC');
	await page.keyboard.press('Escape');
	await expect(panel(page)).toHaveCount(0);
	await expect(page.getByRole('button', { name: 'find a divider' })).toBeFocused();
});

test('the menu of a cell opens the search below that cell, on a narrow window too', async ({
	page,
}) => {
	await page.setViewportSize({ width: 390, height: 844 });
	await open(page, 'From the menu');
	await panel(page).getByRole('button', { name: 'Close' }).click();
	await page.getByRole('button', { name: /^Cell 1/ }).click();
	await page.getByRole('menuitem', { name: 'Find a divider' }).click();
	await field(page, 'Series').selectOption('E24');
	await panel(page).getByLabel('One arm may be two equal parts').check();
	await ask(page, { Input: '24 V', Output: '3 V', 'Load, if any': '1 Mohm' });
	await expect(results(page)).toBeVisible();
	const overflow = await page.evaluate(
		() => document.documentElement.scrollWidth - document.documentElement.clientWidth,
	);
	expect(overflow).toBe(0);
	await results(page)
		.getByRole('button', { name: /^Write / })
		.first()
		.click();
	await expect(page.locator('[data-cell]')).toHaveCount(3);
	await expect(page.locator('[data-cell]').nth(1)).toContainText('R_load = 1 Mohm');
	await expect(page.locator('[data-fault]')).toHaveCount(0);
	await expect(figure(page, 'V_out')).toHaveText(/^\d\.\d+\s*±/);
});
