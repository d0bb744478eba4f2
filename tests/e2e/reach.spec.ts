import { expect, test, type Page } from '@playwright/test';
import { expectAccessible } from '../support/accessible';
import { addCell, figure, newNote, signIn } from '../support/browser';

// A trace copies the whole page at each step.
test.use({ trace: 'off', viewport: { width: 1400, height: 900 } });

const battery = 'Station battery voltage channel';

async function addressOf(page: Page, title: string): Promise<string> {
	await page.goto('/notes');
	return (await page.getByRole('link', { name: title }).first().getAttribute('href'))!;
}

async function check(page: Page, paths: readonly string[]): Promise<void> {
	for (const path of paths) {
		await page.goto(path, { waitUntil: 'load' });
		await expectAccessible(page, path);
	}
}

test('pages that need no account, and errors, are in order by the rules of axe', async ({
	page,
}) => {
	await check(page, ['/sign-in', '/verify']);
	await page.goto('/handbook/proof');
	// Hundreds of cases are set alike; the rules are tried on the first group.
	await page.evaluate(() => {
		const groups = Array.from(document.querySelectorAll('main section'));
		for (const group of groups.slice(1)) group.remove();
	});
	await expectAccessible(page, 'the proof of the figures');
	await check(page, ['/no-such-page']);
	await page.getByRole('link', { name: 'Back to the notes' }).click();
	await page.getByLabel('E-mail').fill('nobody@alderfen.example');
	await page.getByLabel('Password').fill('wrong');
	await page.getByRole('button', { name: 'Sign in' }).click();
	await expect(page.getByRole('alert')).toBeVisible();
	await expectAccessible(page, 'sign-in, refused');
	await page.goto('/verify');
	await page.getByLabel(/type its digest/).fill('0'.repeat(64));
	await page.getByRole('button', { name: 'Verify' }).click();
	await expect(
		page.getByRole('status', { name: 'Outcome' }).or(page.getByRole('alert')),
	).toBeVisible();
	await expectAccessible(page, 'verify, unknown digest');
});

test('pages of the administrator are in order by the rules of axe', async ({ page }) => {
	await signIn(page, 'administrator');
	await check(page, [
		'/team',
		'/team/policy',
		'/team/audit',
		'/team/mail',
		'/account',
		'/notes/MN-999',
	]);
});

test('lists and sheets are in order by the rules of axe', async ({ page }) => {
	await signIn(page, 'engineer');
	await check(page, ['/desk', '/notes', '/notes?q=there-is-no-such-note', '/team']);
	await check(page, [await addressOf(page, 'Solar charge current')]);
});

test('pages of a note are in order by the rules of axe', async ({ page }) => {
	await signIn(page, 'engineer');
	const note = await addressOf(page, battery);
	const places = ['', '/history', '/candidate', '/compare'];
	const ofRevisions = ['/revisions/A', '/revisions/B', '/revisions/B/again'];
	await check(
		page,
		[...places, ...ofRevisions].map((place) => note + place),
	);
});

test('the sheet is in order by the rules of axe with whatever is open on it', async ({ page }) => {
	await signIn(page, 'engineer');
	await newNote(page, 'Reach');
	await expectAccessible(page, 'a new note');
	await addCell(page, 'calculation', 'V_top = tolerance(5 V, 1 %)\nV_half = V_top / 2\nbad = V_x');
	await addCell(page, 'requirement', 'V_half <= 2.6 V');
	await expect(figure(page, 'V_half')).toHaveText(/2\.500/);
	await expectAccessible(page, 'a sheet with figures, a verdict and a fault');

	await page.getByRole('button', { name: 'V_half: formula and doubt' }).click();
	await expect(page.getByRole('region', { name: /V_half/ })).toBeVisible();
	await expectAccessible(page, 'what is behind a line');
	await page.getByRole('button', { name: 'V_half: formula and doubt' }).click();

	await page.getByRole('button', { name: /^Cell 2/ }).click();
	await expect(page.getByRole('menu')).toBeVisible();
	await expectAccessible(page, 'the menu of a cell');
	await page.getByRole('menuitem', { name: 'Comment' }).click();
	await expect(page.getByRole('textbox', { name: 'Comment' })).toBeFocused();
	await expectAccessible(page, 'a comment that is written');
	await page.getByRole('textbox', { name: 'Comment' }).fill('Is it loaded?');
	await page.getByRole('button', { name: 'Comment', exact: true }).click();
	await expect(page.getByText('Is it loaded?')).toBeVisible();
	await expectAccessible(page, 'a comment');

	for (const [keys, label] of [
		['Alt+Shift+X', 'Actions'],
		['Alt+Shift+L', 'Find and replace'],
		['?', 'Keys'],
	] as const) {
		await page.getByRole('button', { name: /^Cell 2/ }).focus();
		await page.keyboard.press(keys);
		await expect(page.getByRole('region', { name: label })).toBeVisible();
		await expectAccessible(page, label);
		await page.keyboard.press('Escape');
	}
	await page.getByRole('button', { name: 'Propose for check' }).click();
	await expect(page.getByRole('dialog')).toBeVisible();
	await expectAccessible(page, 'the proposal');
	await page.keyboard.press('Escape');

	await page.locator('.cm-line', { hasText: 'V_half =' }).click();
	await page.keyboard.press('End');
	await page.keyboard.type(' + V');
	await expect(page.locator('.cm-tooltip-autocomplete')).toBeVisible();
	await expectAccessible(page, 'what is offered while writing');
});
