import { expect, test, type Page } from '@playwright/test';
import { addCell, figure, newNote, signIn } from '../support/browser';
import { shoot } from '../support/screens';

const register = (page: Page) => page.getByRole('navigation', { name: 'Register' });
const names = (page: Page) =>
	register(page)
		.locator('[data-entry]')
		.evaluateAll((all) => all.map((each) => (each as HTMLElement).dataset.entry));

test('the register is filtered and sorted, and leads to where a quantity is used', async ({
	page,
}) => {
	await signIn(page, 'engineer');
	await newNote(page, 'Register');
	await addCell(
		page,
		'calculation',
		'Vin = 10 V # battery\nR2 = 1 kohm\nR10 = 3 kohm\nVout = Vin * R2 / (R2 + R10)',
	);
	await addCell(page, 'requirement', 'Vout <= 2 V');
	await addCell(page, 'text', 'At the pin stand {{Vout}}.');
	await expect(figure(page, 'Vout')).toHaveText(/2\.5\s*V/);
	await expect.poll(() => names(page)).toEqual(['Vin', 'R2', 'R10', 'Vout']);

	await page.keyboard.press('Alt+Shift+R');
	const filter = register(page).getByRole('searchbox');
	await expect(filter).toBeFocused();
	await page.keyboard.type('kΩ');
	await expect.poll(() => names(page)).toEqual(['R2', 'R10']);
	await expect(register(page).getByRole('status')).toContainText('2 of 4');
	await filter.fill('battery');
	await expect.poll(() => names(page)).toEqual(['Vin']);
	await register(page).getByRole('button', { name: 'Show all' }).click();
	await register(page).getByLabel('Which quantities').selectOption('Not met');
	await expect.poll(() => names(page)).toEqual(['Vout']);
	await register(page).getByLabel('Which quantities').selectOption('All');
	await register(page).getByLabel('In which order').selectOption('By name');
	await expect.poll(() => names(page)).toEqual(['R2', 'R10', 'Vin', 'Vout']);
	await register(page).getByLabel('In which order').selectOption('By state');
	await expect.poll(async () => (await names(page))[0]).toBe('Vout');

	await register(page).getByRole('button', { name: 'Vout: where it is used' }).focus();
	await page.keyboard.press('Enter');
	await expect(register(page)).toContainText('Used in 2 places, 1 requirement');
	await shoot(page, 'register', { whole: false });
	await register(page)
		.getByRole('button', { name: /^Cell 3, requirement 1/ })
		.focus();
	await page.keyboard.press('Enter');
	await expect(page.locator('[data-kind="requirement"] .cm-content')).toBeFocused();

	// In the drawer of a phone the same, and going there closes it.
	await page.setViewportSize({ width: 390, height: 844 });
	await page.getByRole('button', { name: 'Outline and register' }).click();
	await register(page).getByRole('searchbox').fill('R2');
	await register(page).getByRole('button', { name: 'R2: where it is used' }).click();
	await register(page)
		.getByRole('button', { name: /^Cell 2, line 4/ })
		.click();
	await expect(register(page)).toBeHidden();
	await expect(page.locator('[data-kind="calculation"] .cm-content')).toBeFocused();
});
