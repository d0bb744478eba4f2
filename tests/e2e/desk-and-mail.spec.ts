import { readFileSync } from 'node:fs';
import { expect, test, type Browser, type Page } from '@playwright/test';
import { expectAccessible } from '../support/accessible';
import { addCell, demoPassword, newNote, openNote, signIn } from '../support/browser';
import { shoot } from '../support/screens';

/** Where the mail that the served program sends can be read. */
const mailPage = () =>
	(JSON.parse(readFileSync('.data/browser-mail.json', 'utf8')) as { pageUrl: string }).pageUrl;

async function arrive(browser: Browser, account: Parameters<typeof signIn>[1]): Promise<Page> {
	const page = await (await browser.newContext()).newPage();
	await signIn(page, account);
	return page;
}

/** Opens a mail by its subject, as soon as it has come. */
async function openMail(page: Page, subject: string): Promise<void> {
	await expect(async () => {
		await page.goto(mailPage());
		await page.getByRole('link', { name: subject, exact: true }).click({ timeout: 500 });
	}).toPass();
}

test('what waits stands on the desk and comes by mail, and one click stops that mail', async ({
	browser,
}) => {
	const engineer = await arrive(browser, 'engineer');
	const note = await newNote(engineer, 'Weir level, desk');
	const number = note.split('/').at(-1)!;
	await addCell(engineer, 'calculation', 'V_in = 10 V\nV_out = V_in / 4');
	await expect(engineer.locator('[data-saving]').first()).toHaveText(/^Saved/);
	await engineer.getByRole('button', { name: 'Propose for check' }).click();
	const dialog = engineer.getByRole('dialog');
	await dialog.getByLabel('What revision A is for').fill('Board for the weir');
	await dialog.getByLabel('Cass Kettering').check();
	await dialog.getByLabel('Wanted by').fill('2026-11-20');
	await dialog.getByLabel('Your password').fill(demoPassword);
	await dialog.getByRole('button', { name: 'Propose for check' }).click();
	await expect(engineer).toHaveURL(/\/candidate$/);

	const peer = await arrive(browser, 'peer');
	await peer.getByRole('navigation', { name: 'Main' }).getByRole('link', { name: 'Desk' }).click();
	const shelf = peer.getByRole('region', { name: 'To check' });
	await expect(shelf.getByRole('link', { name: `${number} Weir level, desk` })).toBeVisible();
	await expect(shelf).toContainText('Was due 20 Nov 2026. Board for the weir');
	await expectAccessible(peer, 'a desk with something to check');
	await shoot(peer, 'desk');
	await openMail(peer, `${number}: candidate A waits for your check`);
	await expect(peer.getByText('Pia Ekdahl asks you to check candidate A')).toBeVisible();
	await shoot(peer, 'mail-of-the-demonstration');
	await peer.getByRole('link', { name: /\/candidate$/ }).click();
	await expect(peer).toHaveURL(new RegExp(`${note}/candidate$`));
	await peer.getByText('Return it instead').click();
	await peer.getByRole('textbox', { name: 'Reason' }).fill('Say where the 10 V come from.');
	await peer.getByLabel('Your password').last().fill(demoPassword);
	await peer.getByRole('button', { name: 'Return' }).click();
	await expect(peer.getByText('Say where the 10 V come from.').first()).toBeVisible();
	await peer.goto('/desk');
	await expect(shelf.getByRole('link', { name: number })).toHaveCount(0);

	await engineer.goto('/desk');
	const returned = engineer.getByRole('region', { name: 'Returned to you' });
	await expect(returned).toContainText('Cass Kettering: Say where the 10 V come from.');

	// Opening the address changes nothing; a mailbox's own button posts to it without an origin.
	await openMail(engineer, `${number}: candidate A was returned`);
	const stop = engineer.getByRole('link', { name: /\/mail\/stop/ }).first();
	const address = (await stop.getAttribute('href'))!;
	await stop.click();
	await expect(engineer.getByText('Stop mail about returned candidates?')).toBeVisible();
	await expectAccessible(engineer, 'stopping mail');
	await shoot(engineer, 'stop-mail');
	const posted = await fetch(address, {
		method: 'POST',
		headers: { 'content-type': 'application/x-www-form-urlencoded' },
		body: 'List-Unsubscribe=One-Click',
	});
	expect(posted.status).toBe(200);
	await engineer.goto('/account');
	const returns = engineer.getByLabel('A candidate of yours is returned');
	await expect(returns).toHaveValue('never');
	await expect(engineer.getByLabel('A comment mentions you')).toHaveValue('at once');
	await shoot(engineer, 'account');
	await returns.selectOption('at once');
	await engineer.getByRole('button', { name: 'Save', exact: true }).click();
	await expect(engineer.getByText('Saved.', { exact: true })).toBeVisible();

	const administrator = await arrive(browser, 'administrator');
	await administrator.goto('/team/mail');
	await expect(administrator.getByText(/^\d+ sent in the last seven days$/)).toBeVisible();
	await shoot(administrator, 'team-mail');
	await openNote(engineer, note);
	await expect(engineer.locator('[data-saving]').first()).toHaveText(/^Saved/);
});
