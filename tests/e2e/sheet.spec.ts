import { expect, test, type Page } from '@playwright/test';
import { addCell as add, figure, newNote, signIn } from '../support/browser';

const cells = (page: Page) => page.locator('[data-cell]');
const terminal = (page: Page, number: number) =>
	page.getByRole('button', { name: new RegExp(`^Cell ${number}(,|$)`) });
const saving = (page: Page) => page.locator('[data-saving]');

/** A new note whose sheet is empty. */
async function emptyNote(page: Page, title: string): Promise<void> {
	await signIn(page, 'engineer');
	await newNote(page, title);
	await terminal(page, 1).click();
	await page.getByRole('menuitem', { name: 'Delete' }).click();
	await expect(page.getByText('This note is empty. Begin with')).toBeVisible();
}

/** Opens a note of the demonstration that has cells of every kind. */
async function openBattery(page: Page, account: 'engineer' | 'administrator'): Promise<void> {
	await signIn(page, account);
	await page.getByRole('link', { name: 'Station battery voltage channel' }).click();
	await expect(cells(page).first()).toBeVisible();
}

async function sources(page: Page): Promise<string[]> {
	const texts = await cells(page).locator('.cm-content, .prose').allInnerTexts();
	return texts.map((text) => text.split('\n')[0] ?? '');
}

test('cells are moved by their terminals, with the pointer and with the keyboard', async ({
	page,
}) => {
	await emptyNote(page, 'Moving');
	for (const name of ['a', 'b', 'c']) await add(page, 'text', `cell ${name}`);
	await expect.poll(() => sources(page)).toEqual(['cell a', 'cell b', 'cell c']);

	const from = (await terminal(page, 1).boundingBox())!;
	const to = (await terminal(page, 3).boundingBox())!;
	await page.mouse.move(from.x + from.width / 2, from.y + from.height / 2);
	await page.mouse.down();
	await page.mouse.move(to.x + 4, to.y + to.height + 4, { steps: 8 });
	await page.mouse.up();
	await expect.poll(() => sources(page)).toEqual(['cell b', 'cell c', 'cell a']);
	await expect(page.getByRole('menu')).toHaveCount(0);

	await terminal(page, 3).focus();
	await page.keyboard.press('Enter');
	await expect(page.getByRole('menuitem', { name: 'Comment' })).toBeFocused();
	await page.getByRole('menuitem', { name: 'Move up' }).press('Enter');
	await expect.poll(() => sources(page)).toEqual(['cell b', 'cell a', 'cell c']);

	await page.keyboard.press('ControlOrMeta+z');
	await expect.poll(() => sources(page)).toEqual(['cell b', 'cell c', 'cell a']);
	await page.keyboard.press('ControlOrMeta+Shift+z');
	await expect.poll(() => sources(page)).toEqual(['cell b', 'cell a', 'cell c']);
	await expect(saving(page)).toHaveText(/^Saved \d\d:\d\d$/);
	await page.reload();
	await expect.poll(() => sources(page)).toEqual(['cell b', 'cell a', 'cell c']);
});

test('a cell is duplicated, deleted and brought back', async ({ page }) => {
	await emptyNote(page, 'Copies');
	await add(page, 'calculation', 'I_max = 8 A');
	await expect(figure(page, 'I_max')).toHaveText(/8\s*A/);
	await terminal(page, 1).click();
	await page.getByRole('menuitem', { name: 'Duplicate' }).click();
	await expect(cells(page)).toHaveCount(2);
	await expect(page.locator('[data-fault=duplicate]').first()).toBeVisible();
	await terminal(page, 2).click();
	await page.getByRole('menuitem', { name: 'Delete' }).click();
	await expect(cells(page)).toHaveCount(1);
	await expect(terminal(page, 1)).toBeFocused();
	await expect(page.locator('[data-fault]')).toHaveCount(0);
	await page.getByRole('button', { name: 'Undo' }).click();
	await expect(cells(page)).toHaveCount(2);
	await expect(page.locator('[data-fault=duplicate]').first()).toBeVisible();
});

test('a fault stands under its line, and one click mends it', async ({ page }) => {
	await emptyNote(page, 'Mends');
	await add(page, 'calculation', 'V = 3 V\nI_max = 8 A\nbad = V_x + I_max');
	const fault = page.locator('[data-fault=reserved], [data-fault=ambiguous]').first();
	await expect(fault).toContainText('unit');
	const mend = fault.getByRole('button');
	const replacement = ((await mend.textContent()) ?? '').replace('Rename to', '').trim();
	await mend.click();
	await expect(figure(page, replacement)).toHaveText(/3\s*V/);
	await expect(page.locator('[data-fault=unknownName]')).toContainText('V_x');
	await expect(figure(page, 'I_max')).toHaveText(/8\s*A/);
});

test('text is shown set, opens with a click or Enter, and quotes live figures', async ({
	page,
}) => {
	await emptyNote(page, 'Text');
	await add(page, 'calculation', 'V_top = 80 mV');
	await add(page, 'text', '## Shunt\n\nDrops **{{V_top}}** <img src=x onerror="alert(1)">');
	const text = page.locator('[data-kind=text]');
	await expect(text.getByRole('heading', { name: 'Shunt' })).toBeVisible();
	await expect(text.locator('strong [data-quantity=V_top]')).toHaveText(/80\s*mV/);
	await expect(text.locator('img')).toHaveCount(0);
	await expect(text).toContainText('<img src=x');
	await expect(page.getByRole('navigation', { name: 'Outline' })).toContainText('Shunt');

	await text.getByRole('heading', { name: 'Shunt' }).click();
	await expect(text.locator('.cm-content')).toBeFocused();
	await page.keyboard.press('Escape');
	await expect(text.getByRole('button', { name: 'Edit text' })).toBeFocused();
	await page.keyboard.press('Enter');
	await expect(text.locator('.cm-content')).toBeFocused();
	await page.keyboard.insertText(' at the top');
	await page.keyboard.press('Escape');
	await expect(text).toContainText('at the top');
});

test('the arrow keys go through the whole sheet, and the title is edited in place', async ({
	page,
}) => {
	await emptyNote(page, 'Arrows');
	await add(page, 'calculation', 'a1 = 1');
	await add(page, 'calculation', 'b1 = 2');
	await page.getByRole('textbox', { name: 'Title of the note' }).click();
	await page.keyboard.press('End');
	await page.keyboard.insertText(' and more');
	await expect(page).toHaveTitle(/Arrows and more/);
	await page.keyboard.press('ArrowDown');
	await expect(cells(page).nth(0).locator('.cm-content')).toBeFocused();
	await page.keyboard.press('ArrowDown');
	await expect(cells(page).nth(1).locator('.cm-content')).toBeFocused();
	await page.keyboard.press('ArrowUp');
	await expect(cells(page).nth(0).locator('.cm-content')).toBeFocused();
	await page.keyboard.press('Tab');
	await expect(cells(page).nth(0).locator('.cm-content')).not.toBeFocused();
});

test('without a connection the page says so, keeps the edits and sends them later', async ({
	page,
	context,
}) => {
	await emptyNote(page, 'Offline');
	await add(page, 'calculation', 'V_a = 1 V');
	await expect(figure(page, 'V_a')).toHaveText(/1\s*V/);
	await expect(saving(page)).toHaveText(/^Saved/);
	await context.setOffline(true);
	await expect(page.getByRole('alert')).toContainText('Connection lost');
	await page.locator('.cm-line', { hasText: 'V_a' }).click();
	await page.keyboard.press('End');
	await page.keyboard.insertText(' * 2');
	await expect(saving(page)).toHaveText(/^Offline: \d+ changes? kept on this computer$/);
	await context.setOffline(false);
	await expect(saving(page)).toHaveText(/^Saved/, { timeout: 30_000 });
	await expect(page.getByRole('alert')).toHaveCount(0);
	await expect(figure(page, 'V_a')).toHaveText(/2\s*V/);
});

test('a comment that cannot be posted keeps its words and says why', async ({ page }) => {
	await emptyNote(page, 'Comments');
	await add(page, 'text', 'words');
	await terminal(page, 1).click();
	await page.getByRole('menuitem', { name: 'Comment' }).click();
	await page.getByRole('textbox', { name: 'Comment' }).fill('Is this so?');
	await page.route('**/threads', (route) => route.abort());
	await page.getByRole('button', { name: 'Comment', exact: true }).click();
	await expect(page.getByRole('alert')).toContainText('cannot be reached');
	await expect(page.getByRole('textbox', { name: 'Comment' })).toHaveValue('Is this so?');
	await page.unroute('**/threads');
	await page.getByRole('button', { name: 'Comment', exact: true }).click();
	await expect(page.locator('[data-thread]')).toContainText('Is this so?');
	await page.getByRole('button', { name: 'Close', exact: true }).click();
	await page.getByText('1 closed on cell 1').click();
	await page.getByRole('button', { name: 'Reopen' }).click();
	await expect(terminal(page, 1)).toHaveAccessibleName('Cell 1, has an open thread');
});

test('who may not write sees the sheet with its figures and can comment', async ({ page }) => {
	await openBattery(page, 'administrator');
	await expect(page.locator('[data-connection=online]')).toBeVisible();
	await expect(page.locator('[data-cell] [data-quantity]').first()).toBeVisible();
	await expect(page.locator('[contenteditable=true]')).toHaveCount(0);
	await expect(page.getByRole('button', { name: 'Propose for check' })).toHaveCount(0);
	await terminal(page, 1).click();
	await expect(page.getByRole('menuitem')).toHaveText(['Comment', 'Fold']);
});

test('nothing moves when the editors take the place of the first paint', async ({ page }) => {
	let open = (): void => undefined;
	const held = new Promise<void>((resolve) => (open = resolve));
	await page.routeWebSocket(/\/sync\//, async (socket) => {
		await held;
		socket.connectToServer();
	});
	await openBattery(page, 'engineer');
	// Loaded whole, as by somebody who follows a link.
	await page.reload();
	await page.evaluate(() => document.fonts.ready.then(() => undefined));
	const places = () =>
		page.locator('[data-cell], [data-cell] .line, [data-cell] .readout').evaluateAll((all) =>
			all.map((element) => {
				const { x, y, width, height } = element.getBoundingClientRect();
				return [element.className, x, y, width, height]
					.join(' ')
					.replace(/svelte-\S+|cm-line/g, '');
			}),
		);
	await expect(page.locator('.cm-content')).toHaveCount(0);
	const before = await places();
	expect(before.length).toBeGreaterThan(20);
	open();
	await expect(page.locator('.cm-content').first()).toBeVisible();
	await expect.poll(async () => (await places()).map(round)).toEqual(before.map(round));
});

/** Places to the half pixel, classes in one order. */
function round(place: string): string {
	const words = place.trim().split(/\s+/);
	const figures = words.slice(-4).map((word) => Math.round(Number(word) * 2) / 2);
	return [...words.slice(0, -4).sort(), ...figures].join(' ');
}

for (const width of [1400, 1024, 390]) {
	test(`at ${width} px nothing scrolls sideways and the register is at hand`, async ({ page }) => {
		await page.setViewportSize({ width, height: 844 });
		await openBattery(page, 'engineer');
		await expect(page.locator('.cm-content').first()).toBeVisible();
		const overflow = await page.evaluate(
			() => document.documentElement.scrollWidth - document.documentElement.clientWidth,
		);
		expect(overflow).toBe(0);
		if (width < 1280) await page.getByRole('button', { name: 'Outline and register' }).click();
		const entry = page.getByRole('navigation', { name: 'Register' }).getByRole('link').last();
		await entry.click();
		await expect(page).toHaveURL(/#cell-/);
	});
}

test('figures follow each edit also after a fault has come and gone beside them', async ({
	page,
}) => {
	await emptyNote(page, 'Following');
	await add(page, 'calculation', 'a = 1 V\nb = 2 * a\nc = 3 V');
	await expect(figure(page, 'b')).toHaveText(/^2\s*V$/);
	const append = async (name: string, typed: string) => {
		await page.locator('.cm-line', { hasText: `${name} =` }).click();
		await page.keyboard.press('End');
		await page.keyboard.type(typed);
	};
	await append('c', ' +');
	await expect(page.locator('[data-fault=syntax]')).toBeVisible();
	await append('a', ' * 2');
	await expect(figure(page, 'b')).toHaveText(/^4\s*V$/);
	await append('c', ' a');
	await expect(page.locator('[data-fault]')).toHaveCount(0);
	await expect(figure(page, 'c')).toHaveText(/^5\s*V$/);
	await append('a', '0');
	await expect(figure(page, 'b')).toHaveText(/^40\s*V$/);
	await expect(figure(page, 'c')).toHaveText(/^23\s*V$/);
});
