import { expect, test, type Browser, type Page } from '@playwright/test';
import { addCell, demoPassword, figure, newNote, openNote, signIn } from '../support/browser';
import { shoot } from '../support/screens';

const sheetSays = (page: Page, words: string | RegExp) =>
	expect(page.locator('[data-saving]').first()).toHaveText(words);

type Account = 'engineer' | 'peer' | 'approver';

async function arrive(browser: Browser, account: Account): Promise<Page> {
	const context = await browser.newContext({ viewport: { width: 1400, height: 900 } });
	const page = await context.newPage();
	await signIn(page, account);
	return page;
}

async function comment(page: Page, terminal: number, body: string, kind: string) {
	await page.getByRole('button', { name: new RegExp(`^Cell ${terminal}\\b`) }).click();
	await page.getByRole('menuitem', { name: 'Comment' }).click();
	await page.getByLabel(kind).check();
	await page.getByLabel('blocks freezing until it is closed').check();
	await page.getByRole('textbox', { name: 'Comment' }).fill(body);
	await page.getByRole('button', { name: 'Comment', exact: true }).click();
}

async function propose(page: Page, changes?: string) {
	await page.getByRole('button', { name: 'Propose for check' }).click();
	const dialog = page.getByRole('dialog');
	await dialog.getByLabel('What revision A is for').fill('Release of the panel board');
	if (changes !== undefined) await dialog.getByLabel(/^What changed since/).fill(changes);
	await dialog.getByLabel('Your password').fill(demoPassword);
	await dialog.getByRole('button', { name: 'Propose for check' }).click();
	await expect(page).toHaveURL(/\/candidate$/);
}

test('three people draft, comment, return, mend, check, approve and freeze a note', async ({
	browser,
}) => {
	test.setTimeout(240_000);
	const engineer = await arrive(browser, 'engineer');
	const peer = await arrive(browser, 'peer');
	const approver = await arrive(browser, 'approver');

	// The engineer drafts; the peer has the same note open and sees each figure as it comes.
	const note = await newNote(engineer, 'Panel voltage channel, 0 to 15 V');
	const number = note.split('/').at(-1)!;
	await openNote(peer, note);
	await engineer.getByRole('button', { name: 'Edit text' }).click();
	await expect(engineer.locator('[data-kind="text"] .cm-focused')).toBeVisible();
	await engineer.keyboard.press('Control+End');
	await engineer.keyboard.insertText('\n\nAt the top of the range the converter sees {{V_adc}}.');
	await engineer.keyboard.press('Escape');
	await addCell(
		engineer,
		'calculation',
		[
			'V_max = 15 V # top of range',
			'R_1 = 100 kohm',
			'R_exact = R_1 * 3.3 V / (V_max - 3.3 V)',
			'R_2 = preferredAbove(R_exact, E24)',
			'V_adc = divider(V_max, R_1, R_2)',
		].join('\n'),
	);
	await addCell(engineer, 'requirement', 'V_adc <= 3.3 V # the reference');
	// 100 kΩ · 3.3 V / 11.7 V = 28.205 kΩ; the next E24 value above is 30 kΩ (IEC 60063); 15 V · 30/130 = 3.461 54 V.
	for (const page of [engineer, peer]) {
		await expect(figure(page, 'R_exact')).toHaveText(/28\.205\s?1\s*kΩ/);
		await expect(figure(page, 'R_2')).toHaveText(/30\s*kΩ/);
		await expect(figure(page, 'V_adc')).toHaveText(/3\.461\s?54\s*V/);
		await expect(page.locator('[data-verdict="not met"]').first()).toBeVisible();
		await expect(page.locator('[data-kind="text"]').getByText(/3\.461\s?54/)).toBeVisible();
	}
	await sheetSays(engineer, /^Saved/);
	await engineer.reload();
	await expect(figure(engineer, 'V_adc')).toHaveText(/3\.461\s?54\s*V/);

	// The peer comments on cell 2; the engineer sees it without asking, and answers.
	await comment(peer, 2, 'Does the lower arm have to be the value above?', 'question');
	const thread = (page: Page) => page.getByRole('complementary', { name: 'Comments on cell 2' });
	await expect(thread(engineer)).toContainText('Does the lower arm');
	await expect(engineer.getByRole('button', { name: 'Cell 2, has an open thread' })).toBeVisible();
	await thread(engineer).getByRole('button', { name: 'Reply' }).click();
	await thread(engineer).getByRole('textbox').fill('No. I take the nearest one below.');
	await thread(engineer).getByRole('button', { name: 'Reply' }).click();
	await expect(thread(peer)).toContainText('I take the nearest one below.');
	await shoot(engineer, 'sheet-with-thread');

	// Proposed, it cannot be frozen: a blocking thread is open and a requirement is not met. The peer returns it.
	await propose(engineer);
	await expect(engineer.getByText('An open blocking question on cell 2.')).toBeVisible();
	await expect(engineer.getByRole('button', { name: 'Sign as checked' })).toHaveCount(0);
	await shoot(engineer, 'candidate-author');
	await peer.goto(`${note}/candidate`);
	await shoot(peer, 'candidate-checker');
	await peer.getByText('Return it instead').click();
	await peer
		.getByRole('textbox', { name: 'Reason' })
		.fill('The requirement on V_adc is not met: 30 kΩ is too much.');
	await peer.getByLabel('Your password').last().fill('not my password');
	await peer.getByRole('button', { name: 'Return with reason' }).click();
	await expect(peer.getByRole('alert')).toBeVisible();
	await expect(peer.getByRole('textbox', { name: 'Reason' })).toHaveValue(/30 kΩ is too much/);
	await peer.getByLabel('Your password').last().fill(demoPassword);
	await peer.getByRole('button', { name: 'Return with reason' }).click();
	await expect(peer.getByText(/Returned by/).first()).toBeVisible();
	await shoot(peer, 'candidate-returned');

	// The engineer mends it; the verdict turns in the peer's page too, and the thread is closed.
	await Promise.all([openNote(engineer, note), openNote(peer, note)]);
	const line = engineer.locator('.cm-line', { hasText: 'preferredAbove' });
	await line.click();
	await engineer.keyboard.press('End');
	await engineer.keyboard.press('Shift+Home');
	await engineer.keyboard.insertText('R_2 = preferred(R_exact, E24)');
	// The nearest E24 value by ratio is 27 kΩ: 15 V · 27/127 = 3.188 98 V.
	for (const page of [engineer, peer]) {
		await expect(figure(page, 'R_2')).toHaveText(/27\s*kΩ/);
		await expect(figure(page, 'V_adc')).toHaveText(/3\.188\s?98\s*V/);
		await expect(page.locator('[data-verdict="met"]').first()).toBeVisible();
	}
	await thread(peer).getByRole('button', { name: 'Close', exact: true }).click();
	await expect(engineer.getByRole('button', { name: 'Cell 2', exact: true })).toBeVisible();
	await sheetSays(engineer, /^Saved/);

	// Proposed again, checked by the peer, approved by the approver: it is frozen as A.
	await propose(engineer, 'The lower arm is 27 kΩ now.');
	await approver.goto(`${note}/candidate`);
	await expect(approver.getByRole('button', { name: 'Approve and freeze' })).toHaveCount(0);
	await peer.goto(`${note}/candidate`);
	await peer.getByLabel('Your password').first().fill(demoPassword);
	await peer.getByRole('button', { name: 'Sign as checked' }).click();
	await expect(peer.getByText('Checked. Waits to be approved.')).toBeVisible();
	await approver.reload();
	await approver.getByLabel('Your password').first().fill(demoPassword);
	await shoot(approver, 'candidate-approver');
	await approver.getByRole('button', { name: 'Approve and freeze' }).click();
	await expect(approver).toHaveURL(/\/revisions\/A$/);
	const digest = async (page: Page) => (await page.locator('.digest').innerText()).trim();
	const sealed = await digest(approver);
	await shoot(approver, 'revision');

	// A reader's page of it, and the list.
	const context = await browser.newContext();
	const reader = await context.newPage();
	await signIn(reader, 'reader');
	await reader.goto(note);
	await expect(reader).toHaveURL(/\/revisions\/A$/);
	expect(await digest(reader)).toBe(sealed);
	await engineer.goto('/notes');
	await expect(engineer.getByRole('row', { name: new RegExp(number) })).toContainText('Frozen');
	await shoot(engineer, 'notes');

	// What is frozen stays: no address takes a change, and the working copy goes on without touching it.
	const revision = `${note}/revisions/A`;
	const origin = new URL(approver.url()).origin;
	for (const method of ['PUT', 'PATCH', 'DELETE', 'POST'] as const) {
		const answer = await approver.request.fetch(revision, { method, headers: { origin } });
		expect(answer.ok(), `${method} on a frozen revision`).toBe(false);
	}
	const again = await approver.request.post(`${note}/candidate?/return`, {
		headers: { origin },
		form: { password: demoPassword, reason: 'Too late.' },
	});
	expect(again.ok() && (await again.text()).includes('"type":"success"')).toBe(false);
	await openNote(engineer, note);
	await engineer.locator('.cm-line', { hasText: 'V_max =' }).first().click();
	await engineer.keyboard.press('End');
	await engineer.keyboard.press('Enter');
	await engineer.keyboard.insertText('later = 1 V');
	await expect(figure(engineer, 'later')).toHaveText(/1\s*V/);
	await sheetSays(engineer, /^Saved/);
	await expect(engineer.getByText('Draft of revision B').first()).toBeVisible();
	await reader.reload();
	expect(await digest(reader)).toBe(sealed);
	await expect(figure(reader, 'V_adc')).toHaveText(/3\.188\s?98\s*V/);
	await expect(figure(reader, 'later')).toHaveCount(0);
	await shoot(engineer, 'sheet-after');
});
