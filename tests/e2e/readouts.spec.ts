import { expect, test, type Page } from '@playwright/test';
import { expectAccessible } from '../support/accessible';
import { addCell, figure, newNote, openNote, signIn } from '../support/browser';
import { shoot } from '../support/screens';

const chooser = (page: Page) => page.getByRole('dialog', { name: /is shown as/ });

test('a click on a readout changes its unit and digits for everybody, wherever it stands', async ({
	page,
	browser,
}) => {
	await signIn(page, 'engineer');
	const path = await newNote(page, 'Set readouts');
	await addCell(page, 'calculation', 'Vref = 2.5 V\nR1 = tolerance(100 kohm, 1 %)');
	await addCell(page, 'text', 'The reference gives {{Vref}}.');
	const peer = await (await browser.newContext()).newPage();
	await signIn(peer, 'peer');
	await openNote(peer, path);

	await figure(page, 'Vref').click();
	await expect(chooser(page).getByLabel('Unit', { exact: true })).toBeFocused();
	await chooser(page).getByLabel('Unit', { exact: true }).selectOption('mV');
	for (const each of [page, peer]) {
		await expect(figure(each, 'Vref')).toHaveText(/^2500\s*mV$/);
		await expect(each.locator('.prose [data-quantity="Vref"]')).toHaveText(/^2500\s*mV$/);
		await expect(each.locator('[data-entry="Vref"]')).toContainText(/2500\s*mV/);
	}
	await chooser(page).getByLabel('Digits').selectOption('3');
	await expect(figure(peer, 'Vref')).toHaveText(/^2500\s*mV$/);
	await chooser(page).getByPlaceholder('Another unit').fill('ohm');
	await page.keyboard.press('Enter');
	await expect(chooser(page).getByRole('alert')).toContainText('cannot express');
	await chooser(page).getByPlaceholder('Another unit').fill('µV');
	await page.keyboard.press('Enter');
	await expect(figure(peer, 'Vref')).toHaveText(/µV$/);
	await expectAccessible(page, 'the chooser of a readout');
	await shoot(page, 'readout-chooser', { whole: false });
	await page.keyboard.press('Escape');
	await expect(chooser(page)).toHaveCount(0);

	// From the keyboard at the cursor; the doubt follows the digits.
	await page.locator('.cm-line', { hasText: 'R1 =' }).click();
	await page.keyboard.press('Home');
	await page.keyboard.press('Alt+Shift+U');
	await chooser(page).getByLabel('Digits').selectOption('5');
	await expect(figure(peer, 'R1')).toHaveText(/^100\.00\s*±\s*1\.13\s*kΩ$/);
	await chooser(page).getByRole('button', { name: 'As usual' }).click();
	await expect(figure(peer, 'R1')).toHaveText(/^100\.0\s*±\s*1\.1\s*kΩ$/);
	await page.keyboard.press('Escape');

	// Each choice is one step to undo, and a name that changes takes its choice along.
	await page.locator('.cm-line', { hasText: 'Vref =' }).click();
	await page.keyboard.press('Home');
	await page.keyboard.press('Alt+Shift+N');
	await page.getByRole('textbox', { name: /^Rename/ }).fill('Vbase');
	await page.keyboard.press('Enter');
	await expect(figure(peer, 'Vbase')).toHaveText(/µV$/);
	await page.keyboard.press('ControlOrMeta+z');
	await expect(figure(peer, 'Vref')).toHaveText(/µV$/);
	await page.reload();
	await expect(figure(page, 'Vref')).toHaveText(/µV$/);
	await peer.context().close();
});
