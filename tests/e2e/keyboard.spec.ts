import { expect, test, type Browser, type Page } from '@playwright/test';
import { demoPassword, emailOf, figure } from '../support/browser';
import { tabTo } from '../support/keyboard';

type Account = Parameters<typeof emailOf>[0];

async function signIn(browser: Browser, account: Account): Promise<Page> {
	const page = await (await browser.newContext()).newPage();
	await page.goto('/sign-in');
	await tabTo(page, /^E-mail/);
	await page.keyboard.type(emailOf(account));
	await tabTo(page, /^Password/);
	await page.keyboard.type(demoPassword);
	await page.keyboard.press('Enter');
	await expect(page).toHaveURL(/\/notes$/);
	return page;
}

/** Opens a note's candidate from the list of notes. */
async function openCandidate(page: Page, title: string): Promise<void> {
	await tabTo(page, new RegExp(title));
	await page.keyboard.press('Enter');
	await expect(page.locator('[data-saving]').first()).toHaveText(/^Saved/);
	await tabTo(page, /^Candidate /);
	await page.keyboard.press('Enter');
	await expect(page).toHaveURL(/\/candidate$/);
}

test('a note is drafted, commented, proposed, checked, approved and frozen with the keyboard alone', async ({
	browser,
}) => {
	test.setTimeout(120_000);
	const engineer = await signIn(browser, 'engineer');
	const title = 'Keyboard channel';
	await tabTo(engineer, /^New note$/);
	await engineer.keyboard.press('Enter');
	await engineer.keyboard.type(title);
	await engineer.keyboard.press('Enter');
	await expect(engineer).toHaveURL(/\/notes\/[A-Z]+-\d+$/);

	// Draft: a calculation below the first cell, then a requirement below that.
	await expect(engineer.locator('[data-saving]').first()).toHaveText(/^Saved/);
	await tabTo(engineer, /^calculation$/);
	await engineer.keyboard.press('Enter');
	await expect(engineer.locator('[data-kind=calculation] .cm-focused')).toBeVisible();
	await engineer.keyboard.type('V_in = 10 V\nV_out = V_in / 4');
	await expect(figure(engineer, 'V_out')).toHaveText(/2\.5\s*V/);
	await engineer.keyboard.press('Escape');
	await tabTo(engineer, /^requirement$/);
	await engineer.keyboard.press('Enter');
	await expect(engineer.locator('[data-kind=requirement] .cm-focused')).toBeVisible();
	await engineer.keyboard.type('V_out <= 3 V');
	await expect(engineer.locator('[data-verdict=met]').first()).toBeVisible();

	// Comment on the cell one is at, answer from the same place.
	await engineer.keyboard.press('Alt+Shift+C');
	await expect(engineer.getByRole('textbox', { name: 'Comment' })).toBeFocused();
	await engineer.keyboard.type('Unloaded.');
	await tabTo(engineer, /^Comment$/);
	await engineer.keyboard.press('Enter');
	await expect(engineer.getByRole('complementary', { name: /Comments on cell/ })).toContainText(
		'Unloaded.',
	);

	await expect(engineer.locator('[data-saving]').first()).toHaveText(/^Saved/);
	await tabTo(engineer, /^Propose/);
	await engineer.keyboard.press('Enter');
	await expect(engineer.getByRole('dialog')).toBeVisible();
	await tabTo(engineer, /^What revision A is for/);
	await engineer.keyboard.type('Release');
	await tabTo(engineer, /^Your password/);
	await engineer.keyboard.type(demoPassword);
	await engineer.keyboard.press('Enter');
	await expect(engineer).toHaveURL(/\/candidate$/);

	const peer = await signIn(browser, 'peer');
	await openCandidate(peer, title);
	await tabTo(peer, /^Your password/);
	await peer.keyboard.type(demoPassword);
	await peer.keyboard.press('Enter');
	await expect(peer.getByText('Checked. Waits to be approved.')).toBeVisible();

	const approver = await signIn(browser, 'approver');
	await openCandidate(approver, title);
	await tabTo(approver, /^Your password/);
	await approver.keyboard.type(demoPassword);
	await approver.keyboard.press('Enter');
	await expect(approver).toHaveURL(/\/revisions\/A$/);
	await expect(figure(approver, 'V_out')).toHaveText(/2\.5\s*V/);
});
