import { readFile } from 'node:fs/promises';
import { expect, test, type Page } from '@playwright/test';
import { expectAccessible } from '../support/accessible';
import { addCell, figure, newNote, signIn } from '../support/browser';
import { shoot } from '../support/screens';

const lines = [
	'V_max = 32 V  # top of the range',
	'V_ref = normal(2.5 V, 1.25 mV)',
	'R_1 = tolerance(470 kohm, 1 %)',
	'R_2 = tolerance(38.3 kohm, 1 %)',
	'R_sum = R_1 + R_2',
	'V_adc = V_max * R_2 / R_sum',
	'spare = 1 - V_adc / V_ref',
].join('\n');

async function start(page: Page, title: string): Promise<void> {
	await signIn(page, 'engineer');
	await newNote(page, title);
	await addCell(page, 'calculation', lines);
	await expect(figure(page, 'spare')).toBeVisible();
	await addCell(page, 'requirement', 'V_adc <= 0.98 * V_ref\nspare >= 1 %');
	await expect(page.getByText('to spare').first()).toBeVisible();
}

const picture = (page: Page) => page.locator('[data-kind=curve] figure');
const reading = (page: Page) => picture(page).getByRole('slider');

test('a curve is written with completion, drawn, read, tabled and mended', async ({ page }) => {
	await start(page, 'Curve');
	await page.getByRole('button', { name: 'curve', exact: true }).click();
	await page.keyboard.type('V_ad');
	await page.getByRole('option', { name: 'V_adc' }).click();
	await page.keyboard.insertText(' over V_max from 0 to 40 V');
	const fault = page.locator('[data-kind=curve] [data-fault=dimension]');
	await expect(fault).toContainText('but 0 is a pure number');
	await fault.getByRole('button', { name: 'Put 0 V' }).click();
	await expect(picture(page)).toContainText(/met\s*0\sV to 3\d\.\d+\sV/);
	await expect(picture(page)).toContainText('not met');

	await reading(page).focus();
	await expect(reading(page)).toHaveAttribute(
		'aria-valuetext',
		/^V_max = 32\sV: V_adc = 2\.41\d* ±\s\d+\.\d+\sV, /,
	);
	await page.keyboard.press('End');
	await expect(picture(page).locator('p.read')).toHaveText(/^V_max = 40\sV: .*, not met$/);
	await page.keyboard.press('ArrowLeft');
	await expect(reading(page)).toHaveAttribute('aria-valuetext', /^V_max = 39\.6\sV/);
	const box = await picture(page).locator('svg:visible').first().boundingBox();
	await page.mouse.move(box!.x + box!.width * 0.088, box!.y + box!.height / 2);
	await expect(picture(page).locator('p.read')).toHaveText(/^V_max = 0\sV: V_adc = 0\sV, met$/);

	await picture(page).getByText('101 points as a table').click();
	await expect(picture(page).getByRole('row')).toHaveCount(102);
	const [download] = await Promise.all([
		page.waitForEvent('download'),
		picture(page).getByRole('link', { name: 'Save as CSV' }).click(),
	]);
	expect(download.suggestedFilename()).toBe('V_adc-over-V_max.csv');
	const csv = await readFile(await download.path(), 'utf8');
	expect(csv.split('\r\n')).toHaveLength(103);
	await expectAccessible(page, 'a note with a curve');
	await picture(page).getByText('101 points as a table').click();
	await shoot(page, 'curve');
});

test('a curve follows the note, keeps its picture while it is wrong, and does what every cell does', async ({
	page,
}) => {
	await start(page, 'Curve cell');
	await addCell(page, 'curve', 'V_adc over V_max from 0 V to 40 V in 41 points');
	await expect(picture(page)).toContainText('41 points as a table');
	const cells = page.locator('[data-cell]');
	await expect(cells).toHaveCount(4);
	const editor = page.locator('[data-kind=curve] .cm-content');
	await editor.click();
	await page.keyboard.press('Home');
	await page.keyboard.type('x');
	await expect(page.locator('[data-kind=curve] [data-fault]')).toContainText('is not defined');
	await expect(page.locator('[data-kind=curve]')).toContainText('The picture is that of before.');
	await page.keyboard.press('Backspace');
	await expect(page.locator('[data-kind=curve] [data-fault]')).toHaveCount(0);
	await page.keyboard.press('Alt+Shift+D');
	await expect(picture(page)).toHaveCount(2);
	await page.keyboard.press('Control+z');
	await expect(picture(page)).toHaveCount(1);
	await page.reload();
	await expect(picture(page)).toContainText('41 points as a table');
});

test('what hangs together with a quantity is drawn, walked through with keys, and follows the figures', async ({
	page,
}) => {
	await start(page, 'Dependencies');
	await page.locator('[data-kind=calculation] .cm-line', { hasText: 'R_2 / R_sum' }).click();
	await page.keyboard.press('Home');
	await page.keyboard.press('Alt+Shift+P');
	const dialog = page.getByRole('dialog');
	const box = (name: string | RegExp) => dialog.getByRole('button', { name, pressed: false });
	const chosen = dialog.getByRole('button', { pressed: true });
	await expect(chosen).toBeFocused();
	await expect(chosen).toHaveAccessibleName(/^V_adc, 2\.4\d* ± .*, chosen, 3 inputs, 2 results$/);
	await expect(box(/^V_adc <= 0\.98 \* V_ref, (met|undecided|not met)/)).toBeVisible();

	await page.keyboard.press('ArrowLeft');
	await expect(dialog.locator('[data-knot]:focus')).toHaveAttribute(
		'data-knot',
		/^(V_max|R_2|R_sum)$/,
	);
	await page.keyboard.press('ArrowRight');
	await expect(chosen).toBeFocused();
	await page.keyboard.press('ArrowRight');
	await page.keyboard.press('Enter');
	await expect(chosen).not.toHaveAccessibleName(/^V_adc, 2/);
	await dialog.getByRole('button', { name: 'R_sum', exact: true }).first().click();
	await expect(chosen).toHaveAccessibleName(/^R_sum/);
	await expect(dialog.getByRole('button', { name: 'V_ref', exact: true })).toHaveCount(0);
	await dialog.getByLabel('Only its own paths').check();
	await expect(box(/^V_ref,/)).toHaveCount(0);
	await dialog.getByLabel('Only its own paths').uncheck();
	await expect(box(/^V_ref,/)).toBeVisible();
	await expectAccessible(page, 'a dependency picture');
	await shoot(page, 'dependencies', { whole: false });

	await chosen.click();
	await expect(dialog).toHaveCount(0);
	await expect(page.locator('.cm-focused .cm-activeLine, .cm-focused .line-active')).toContainText(
		'R_1 + R_2',
	);

	await page.getByRole('button', { name: 'V_adc: formula and doubt' }).click();
	await page.getByRole('button', { name: 'Draw what hangs together' }).click();
	await expect(chosen).toHaveAccessibleName(/^V_adc/);
	await page.keyboard.press('Escape');
	await expect(dialog).toHaveCount(0);
});
