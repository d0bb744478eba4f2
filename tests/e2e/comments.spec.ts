import { expect, test, type Browser, type Page } from '@playwright/test';
import { addCell, newNote, openNote, signIn } from '../support/browser';
import { shoot } from '../support/screens';

async function arrive(browser: Browser, account: Parameters<typeof signIn>[1]): Promise<Page> {
	const context = await browser.newContext({ viewport: { width: 1400, height: 900 } });
	const page = await context.newPage();
	await signIn(page, account);
	return page;
}

const saved = (page: Page) => expect(page.locator('[data-saving]').first()).toHaveText(/^Saved/);
const lines = (page: Page) => page.locator('[data-kind=calculation] .cm-content');

test('a comment on some words names a person, is answered by them and closed, and keeps to its words', async ({
	browser,
}) => {
	const engineer = await arrive(browser, 'engineer');
	const note = await newNote(engineer, 'Words to comment on');
	await addCell(engineer, 'calculation', 'R_1 = 470 kohm\nR_2 = 39 kohm');
	await saved(engineer);

	// The second line's value is selected with the keyboard, and commented on with a key.
	await lines(engineer).click();
	await engineer.keyboard.press('ControlOrMeta+End');
	for (let step = 0; step < '39 kohm'.length; step++)
		await engineer.keyboard.press('Shift+ArrowLeft');
	await engineer.keyboard.press('Alt+Shift+Q');
	const form = engineer.locator('form', {
		has: engineer.getByRole('textbox', { name: 'Comment' }),
	});
	await expect(form).toContainText('About 39 kohm');
	const words = form.getByRole('textbox', { name: 'Comment' });
	await words.pressSequentially('Is this E96, @cass');
	await expect(form.getByRole('option', { name: 'Cass Kettering' })).toBeVisible();
	await words.press('Enter');
	await expect(words).toHaveValue('Is this E96, @Cass Kettering ');
	await form.getByLabel(/blocks freezing/).check();
	await form.getByRole('button', { name: 'Comment', exact: true }).click();
	const card = engineer.locator('[data-thread]');
	await expect(card).toContainText('@Cass Kettering');
	await expect(card).toContainText('blocks freezing');
	const mark = engineer.locator('.commented');
	await expect(mark).toHaveText('39 kohm');

	// What is written around them moves the words; their comment stands out when it is chosen.
	await lines(engineer).click();
	await engineer.keyboard.press('ControlOrMeta+Home');
	await engineer.keyboard.insertText('R_0 = 1 ohm\n');
	await expect(mark).toHaveText('39 kohm');
	await card.getByRole('button', { name: /39 kohm/ }).click();
	await expect(engineer.locator('.commented-chosen')).toHaveText('39 kohm');
	await saved(engineer);
	await shoot(engineer, 'comment-on-words', { whole: false });

	const peer = await arrive(browser, 'peer');
	await openNote(peer, note);
	await peer.getByText('Comments, 1').click();
	await peer.getByLabel('Names me').check();
	const answered = peer.locator('[data-thread]');
	await expect(answered).toBeVisible();
	await peer.getByLabel('Kind').selectOption('remark');
	await expect(answered).toHaveCount(0);
	await peer.getByLabel('Kind').selectOption('');
	await answered.getByRole('button', { name: 'Reply' }).click();
	await answered.getByRole('textbox', { name: 'Comment' }).fill('It is not. 39.2 kohm is.');
	await answered.getByRole('button', { name: 'Answer and hand back' }).click();
	await expect(answered).toContainText('Answered and handed back by Cass Kettering');

	await expect(card).toContainText('answered');
	await card.getByRole('button', { name: 'Let it not block' }).click();
	await expect(card).toContainText('Made not to block freezing by Pia Ekdahl');
	// The words go, and the comment says so with what they were.
	await lines(engineer).click();
	await engineer.keyboard.press('ControlOrMeta+End');
	await engineer.keyboard.press('Shift+Home');
	await engineer.keyboard.press('Backspace');
	await expect(card).toContainText('The words this was about are gone: 39 kohm');
	await card.getByRole('button', { name: 'Close' }).click();
	await expect(engineer.getByText('1 closed on cell 2')).toBeVisible();
	await peer.getByLabel('Not closed').check();
	await expect(answered).toHaveCount(0);
	await engineer.context().close();
	await peer.context().close();
});

test('the candidate shows the comments that are asked for', async ({ page }) => {
	await signIn(page, 'peer');
	await page.goto('/notes/MN-004/candidate');
	const threads = page.getByText(/comment thread.* on cell/);
	const all = await threads.count();
	expect(all).toBeGreaterThan(1);
	await page.getByLabel('Blocking').check();
	await page.getByRole('button', { name: 'Show these' }).click();
	await expect(page).toHaveURL(/blocking=on/);
	await expect(threads).toHaveCount(1);
	await shoot(page, 'candidate-comments');
});
