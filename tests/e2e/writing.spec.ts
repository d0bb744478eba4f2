import { expect, test, type Page } from '@playwright/test';
import { addCell, figure, newNote, signIn } from '../support/browser';
import { shoot } from '../support/screens';

const content = (page: Page, cell: number) =>
	page.locator('[data-cell]').nth(cell).locator('.cm-content');
/** Lines of a cell's editor as they were typed, without the results that stand in them. */
const lines = (page: Page, cell: number) =>
	content(page, cell)
		.locator('.cm-line')
		.evaluateAll((all) =>
			all.map((line) => {
				const typed = line.cloneNode(true) as HTMLElement;
				typed.querySelectorAll('[contenteditable=false]').forEach((result) => result.remove());
				return typed.textContent.trim();
			}),
		);
const offers = (page: Page) => page.locator('.cm-tooltip-autocomplete li');
const card = (page: Page, name: string) => page.locator(`[data-fact="${name}"]`);
const status = (page: Page) => page.locator('.told');

/** A note with a text, formulas and a requirement; the cursor stands at the end of the formulas. */
async function dividerNote(page: Page, title: string): Promise<void> {
	await signIn(page, 'engineer');
	await newNote(page, title);
	await addCell(
		page,
		'calculation',
		'Vmax = 32 V # highest input\nR1 = 470 kohm\nR2 = 33 kohm\nVadc = divider(Vmax, R1, R2)',
	);
	await addCell(page, 'requirement', 'Vadc <= 2.45 V');
	await addCell(page, 'text', 'Across {{R1}} and {{R2}} it gives {{Vadc}}.');
	await expect(figure(page, 'Vadc')).toHaveText(/2\.099\s*4\s*V/);
	await content(page, 1).click();
	await page.keyboard.press('ControlOrMeta+End');
	await page.keyboard.press('Enter');
}

test('names, units, functions and quoted figures are offered while they are written', async ({
	page,
}) => {
	await dividerNote(page, 'Offers');
	await page.keyboard.type('ratio = Va');
	await expect(offers(page).first()).toContainText('Vadc');
	await expect(offers(page).first()).toContainText(/2\.099\s*4\s*V/);
	await expect(page.locator('.cm-completionInfo')).toContainText('divider(Vmax, R1, R2)');
	await shoot(page, 'editor-offers', { whole: false });
	await page.keyboard.press('Enter');
	await page.keyboard.type(' / Vmax');
	// What is written whole needs no taking: Enter is a new line.
	await expect(offers(page).first()).toContainText('Vmax');
	await page.keyboard.press('Enter');
	await expect(figure(page, 'ratio')).toHaveText(/0\.065/);

	await page.keyboard.type('Rs = paral');
	await expect(offers(page).first()).toContainText('parallel');
	await expect(page.locator('.cm-completionInfo')).toContainText('parallel(');
	await offers(page).first().click();
	await page.keyboard.type('R1, 4.7 ko');
	await expect(offers(page).first()).toContainText('kΩ');
	await offers(page).first().click();
	await page.keyboard.press('End');
	await expect.poll(() => lines(page, 1)).toContain('Rs = parallel(R1, 4.7 kΩ)');
	await expect(figure(page, 'Rs')).toHaveText(/4\.65/);

	await content(page, 2).click();
	await page.keyboard.press('End');
	await page.keyboard.press('Enter');
	await page.keyboard.type('rat');
	await expect(offers(page).first()).toContainText('ratio');
	await offers(page).first().click();
	await page.keyboard.type(' < 0.1');
	await expect(page.locator('[data-kind=requirement] .line-requirement')).toHaveCount(2);

	const text = page.locator('[data-kind=text]').last();
	await text.getByRole('button', { name: 'Edit text' }).click();
	await page.keyboard.type(' The ratio is {{rat');
	await expect(offers(page).first()).toContainText('ratio');
	await offers(page).first().click();
	await page.keyboard.press('Escape');
	await expect(text.locator('[data-quantity=ratio]')).toHaveText(/0\.065/);
});

test('offers stay under their line when a message above the sheet moves it', async ({
	page,
	context,
}) => {
	await dividerNote(page, 'Offers that follow');
	await page.keyboard.type('ratio = Va');
	await expect(offers(page).first()).toContainText('Vadc');
	const gap = async () => {
		const line = await content(page, 1).locator('.cm-line', { hasText: 'ratio =' }).boundingBox();
		const list = await page.locator('.cm-tooltip-autocomplete').boundingBox();
		return line && list ? Math.round(list.y - line.y) : undefined;
	};
	const before = await gap();
	expect(before).toBeGreaterThan(10);
	await context.setOffline(true);
	await expect(page.getByRole('alert')).toContainText('Connection lost');
	await expect.poll(gap).toBe(before);
	await context.setOffline(false);
});

test('a name says what it is, leads to its definition and is renamed everywhere as one step', async ({
	page,
}) => {
	await dividerNote(page, 'Names');
	await content(page, 2)
		.locator('.cm-line')
		.first()
		.hover({ position: { x: 10, y: 14 } });
	await expect(card(page, 'Vadc')).toContainText(/2\.099\s*4\s*V/);
	await expect(card(page, 'Vadc')).toContainText('Cell 2, line 4');

	await content(page, 2).click({ position: { x: 10, y: 14 } });
	await page.keyboard.press('Alt+Shift+W');
	await expect(card(page, 'Vadc')).toContainText('divider(Vmax, R1, R2)');
	await shoot(page, 'editor-explanation', { whole: false });
	await page.keyboard.press('Escape');
	await expect(card(page, 'Vadc')).toHaveCount(0);
	await page.keyboard.press('Alt+Shift+G');
	await expect(content(page, 1)).toBeFocused();
	await expect(page.locator('.line-active')).toContainText('divider');

	await page.keyboard.press('Alt+Shift+N');
	const next = page.getByLabel(/^Rename Vadc in 3 places of 3 cells to$/);
	await next.fill('R1');
	await expect(page.getByText('R1 is already defined in cell 2, line 2.')).toBeVisible();
	await next.fill('kohm');
	await expect(page.getByText('kohm is the unit kiloohm.')).toBeVisible();
	await shoot(page, 'editor-rename', { whole: false });
	await next.fill('V_pin');
	await page.keyboard.press('Enter');
	await expect(status(page)).toHaveText('Vadc is V_pin now, in 3 places.');
	await expect(figure(page, 'V_pin')).toHaveText(/2\.099\s*4\s*V/);
	await expect(page.locator('[data-kind=text] [data-quantity=V_pin]')).toBeVisible();
	await expect.poll(() => lines(page, 2)).toEqual(['V_pin <= 2.45 V']);
	await page.keyboard.press('ControlOrMeta+z');
	await expect(page.locator('[data-kind=text] [data-quantity=Vadc]')).toBeVisible();
	await expect(figure(page, 'Vadc')).toHaveText(/2\.099\s*4\s*V/);
	await expect(page.locator('[data-quantity=V_pin]')).toHaveCount(0);
});

test('faults are mended by a key: where they stand, at the end of the line, in all of the note', async ({
	page,
}) => {
	await dividerNote(page, 'Mends by key');
	await page.keyboard.type('a = sqrt(R1 * R2 # mean');
	await expect(page.locator('[data-fault=syntax]')).toContainText('not closed');
	await page.keyboard.press('Alt+Shift+M');
	await expect(figure(page, 'a')).toHaveText(/124\./);
	await page.keyboard.press('ControlOrMeta+End');
	await page.keyboard.press('Enter');
	await page.keyboard.type('b = Vamx * 2');
	await expect(page.locator('[data-fault=unknownName]')).toContainText('Vmax');
	await page.keyboard.press('Enter');
	await page.keyboard.type('C = 10 nF');
	await page.keyboard.press('Enter');
	await page.keyboard.type('tau = C * R1');
	await expect(page.locator('[data-fault=reserved]')).toContainText('coulomb');
	await shoot(page, 'editor-faults', { whole: false });
	await page.getByRole('button', { name: 'Rename to C1' }).first().click();
	await expect(figure(page, 'tau')).toHaveText(/4\.7\s*ms/);
	await page.keyboard.press('Alt+Shift+E');
	await page.keyboard.press('Alt+Shift+M');
	await expect(figure(page, 'b')).toHaveText(/64\s*V/);
	await expect(page.locator('[data-fault]')).toHaveCount(0);
});

test('text is found in all cells and replaced, all of it as one step', async ({ page }) => {
	await dividerNote(page, 'Finding');
	await page.keyboard.type('R12 = 2 * R1');
	await page.keyboard.press('Alt+Shift+L');
	const find = page.getByRole('textbox', { name: 'Find', exact: true });
	await find.fill('r1');
	await expect(page.getByRole('status').filter({ hasText: 'of 5' })).toHaveText('1 of 5');
	await page.getByLabel('Whole names only').check();
	await expect(page.getByRole('status').filter({ hasText: 'of 4' })).toHaveText('1 of 4');
	await page.getByLabel('Capitals count').check();
	await expect(page.getByRole('status').filter({ hasText: 'None' })).toBeVisible();
	await find.fill('R1');
	await find.press('Shift+Enter');
	await expect(page.getByRole('status').filter({ hasText: '4 of 4' })).toBeVisible();
	await expect(page.locator('[data-kind=text] .hit-current')).toHaveText('R1');
	await find.press('Enter');
	await expect(page.locator('[data-kind=calculation] .hit-current')).toHaveText('R1');
	await expect(page.locator('[data-kind=text] .cm-content')).toHaveCount(0);
	await shoot(page, 'editor-find', { whole: false });
	await page.getByRole('textbox', { name: 'Replace with' }).fill('R_top');
	await page.getByRole('button', { name: 'Replace', exact: true }).click();
	await expect(page.getByRole('status').filter({ hasText: 'of 3' })).toBeVisible();
	await page.getByRole('button', { name: 'Replace all' }).click();
	await expect(status(page)).toHaveText('3 places replaced.');
	await page.keyboard.press('Escape');
	await expect(page.locator('[data-kind=text] [data-quantity=R_top]')).toBeVisible();
	await page.getByRole('button', { name: 'Undo' }).click();
	await page.getByRole('button', { name: 'Undo' }).click();
	await expect(page.locator('[data-kind=text] [data-quantity=R1]')).toBeVisible();
	await expect.poll(() => lines(page, 1)).toContain('R12 = 2 * R1');
});

test('text shows formulas, tables and lists, and what is hostile in them does nothing', async ({
	page,
}) => {
	const dialogs: string[] = [];
	page.on('dialog', (dialog) => {
		dialogs.push(dialog.message());
		void dialog.dismiss();
	});
	await dividerNote(page, 'Formulas');
	const styles = page.locator('head link[rel=stylesheet][href*=katex]');
	await expect(styles).toHaveCount(0);
	await addCell(
		page,
		'text',
		[
			'## Ratio',
			'With $\\frac{R_2}{R_1 + R_2}$ it gives $V = {{Vadc}}$.',
			'',
			'$$',
			'\\tau = \\frac{R_1 R_2}{R_1 + R_2} C',
			'$$',
			'',
			'| part | value |',
			'| --- | --- |',
			'| upper | {{R1: Mohm}} |',
			'',
			'- [norm](https://norm.example) $\\href{javascript:alert(1)}{x}$',
			'- $\\text{<img src=x onerror=alert(2)>}$ <script>alert(3)</script>',
		].join('\n'),
	);
	const text = page.locator('[data-kind=text]').last();
	await expect(text.locator('.katex-display')).toBeVisible();
	await expect(text.locator('.katex').nth(1)).toContainText('2.099');
	await expect(text.getByRole('cell', { name: '0.47' })).toBeVisible();
	await expect(text.locator('a')).toHaveCount(1);
	await expect(text.locator('img, script')).toHaveCount(0);
	await expect(styles).toHaveCount(1);
	await shoot(page, 'editor-prose');
	await page.reload();
	await expect(text.locator('.katex-display')).toBeVisible();
	// The MathML beside the drawn formula is for screen readers; their styles hide it, and stand in the HTML already.
	await expect(text.locator('.katex-mathml').first()).toHaveCSS('position', 'absolute');
	expect(await (await page.request.get(page.url())).text()).toMatch(
		/<link rel="stylesheet" href="[^"]*katex/,
	);
	await expect(styles).toHaveCount(1);
	expect(dialogs).toEqual([]);
});

test('on a phone the signs of formulas are in reach beside the keyboard', async ({ page }) => {
	await page.setViewportSize({ width: 390, height: 844 });
	await dividerNote(page, 'Phone');
	await page.keyboard.type('Rx = 4.7 k');
	await page.getByRole('button', { name: 'Write Ω' }).click();
	await expect(content(page, 1)).toBeFocused();
	await expect(figure(page, 'Rx')).toHaveText(/4\.7\s*kΩ/);
	await page.keyboard.press('Escape');
	await expect(page.getByRole('toolbar', { name: 'Signs' })).toHaveCount(0);
});
