import { expect, test, type Page } from '@playwright/test';
import { demoPassword, emailOf, signIn } from '../support/browser';
import { shoot } from '../support/screens';

const rows = (page: Page) => page.locator('tbody tr');
const column = (page: Page, name: string) => page.locator(`tbody td.${name}`).allInnerTexts();

test('a wrong password keeps the e-mail, never the password', async ({ page }) => {
	await page.goto('/sign-in');
	await page.getByLabel('E-mail').fill(emailOf('engineer'));
	await page.getByLabel('Password').fill('not the password');
	await page.getByRole('button', { name: 'Sign in' }).click();
	await expect(page.getByRole('alert')).not.toBeEmpty();
	await expect(page.getByLabel('E-mail')).toHaveValue(emailOf('engineer'));
	await expect(page.getByLabel('Password')).toHaveValue('');
	expect(await page.content()).not.toContain('not the password');
	await expect(page).toHaveURL(/\/sign-in/);
});

test('a stranger is asked to sign in and comes back to the page they wanted', async ({ page }) => {
	await page.goto('/notes?state=frozen');
	await expect(page).toHaveURL(/\/sign-in\?to=/);
	await page.getByLabel('E-mail').fill(emailOf('engineer'));
	await page.getByLabel('Password').fill(demoPassword);
	await page.getByRole('button', { name: 'Sign in' }).click();
	await expect(page).toHaveURL(/\/notes\?state=frozen$/);
});

test('signing out ends the session', async ({ page }) => {
	await signIn(page, 'engineer');
	await page.getByRole('button', { name: /: menu$/ }).click();
	await page.getByRole('button', { name: 'Sign out' }).click();
	await expect(page).toHaveURL(/\/sign-in/);
	await page.goto('/notes');
	await expect(page).toHaveURL(/\/sign-in/);
});

test('the list is filtered by links', async ({ page }) => {
	await signIn(page, 'engineer');
	const all = await rows(page).count();
	expect(all).toBeGreaterThanOrEqual(3);
	await page.getByRole('link', { name: 'Frozen', exact: true }).click();
	await expect(page).toHaveURL(/state=frozen/);
	await expect(page.getByRole('link', { name: 'Frozen', exact: true })).toHaveAttribute(
		'aria-current',
		'true',
	);
	await expect.poll(() => rows(page).count()).toBeLessThan(all);
	const states = await column(page, 'state');
	expect(states.length).toBeGreaterThan(0);
	expect(new Set(states)).toEqual(new Set(['Frozen']));
});

test('the list is sorted by its heads, and the link says how', async ({ page }) => {
	await signIn(page, 'engineer');
	const head = page.getByRole('columnheader', { name: 'Title' });
	await head.getByRole('link').click();
	await expect(head).toHaveAttribute('aria-sort', 'ascending');
	const rising = await column(page, 'number');
	const link = page.url();
	await head.getByRole('link').click();
	await expect(head).toHaveAttribute('aria-sort', 'descending');
	expect(await column(page, 'number')).toEqual(rising.toReversed());
	await page.goto(link);
	expect(await column(page, 'number')).toEqual(rising);
});

test('the list is searched and can be linked', async ({ page }) => {
	await signIn(page, 'engineer');
	const numbers = await column(page, 'number');
	const wanted = numbers[1]!;
	await page.getByRole('searchbox', { name: 'Search notes' }).fill(wanted);
	await page.getByRole('button', { name: 'Search' }).click();
	await expect(page).toHaveURL(new RegExp(`q=${wanted}`));
	await expect(rows(page)).toHaveCount(1);
	await page.reload();
	expect(await column(page, 'number')).toEqual([wanted]);
	await page.goto('/notes?q=there-is-no-such-note');
	await expect(page.getByText('No note fits.')).toBeVisible();
	await page.getByRole('link', { name: 'Show all notes' }).click();
	await expect(rows(page)).toHaveCount(numbers.length);
});

test('a new note asks for a title and gets the next number', async ({ page }) => {
	await signIn(page, 'engineer');
	const numbers = await column(page, 'number');
	await page.getByRole('button', { name: 'New note' }).click();
	await page.getByLabel('Title').fill('   ');
	await page.getByRole('button', { name: 'Create note' }).click();
	await expect(page.getByRole('alert')).toHaveText('Give the note a title.');
	await page.getByLabel('Title').fill('Enclosure humidity, 0 to 100 %');
	await page.getByRole('button', { name: 'Create note' }).click();
	await expect(page).toHaveURL(/\/notes\/[A-Z]+-\d+$/);
	const made = page.url().split('/').at(-1)!;
	expect(numbers).not.toContain(made);
	await page.goto('/notes?q=humidity');
	expect(await column(page, 'number')).toEqual([made]);
});

test('a reader sees frozen revisions only', async ({ page, browser }) => {
	await signIn(page, 'reader');
	const readable = await column(page, 'number');
	expect(readable.length).toBeGreaterThan(0);
	expect(new Set(await column(page, 'state'))).toEqual(new Set(['Frozen', 'Withdrawn']));
	await expect(page.getByRole('button', { name: 'New note' })).toHaveCount(0);
	await page.goto(`/notes/${readable[0]!}`);
	await expect(page).toHaveURL(/\/revisions\/[A-Z]+$/);
	await expect(page.getByRole('link', { name: 'Working copy' })).toHaveCount(0);

	const context = await browser.newContext();
	const engineer = await context.newPage();
	await signIn(engineer, 'engineer');
	const hidden = (await column(engineer, 'number')).filter((it) => !readable.includes(it));
	await context.close();
	expect(hidden.length, 'the demonstration has notes without a revision').toBeGreaterThan(0);
	for (const number of hidden) {
		for (const path of ['', '/candidate', '/revisions/A']) {
			const response = await page.goto(`/notes/${number}${path}`);
			expect([403, 404], `${number}${path}`).toContain(response!.status());
		}
	}
});

test('a frozen revision ships no scripts and carries its seal and signatures', async ({ page }) => {
	await signIn(page, 'reader');
	const scripts: string[] = [];
	await page.locator('tbody td.title a').first().click();
	await expect(page).toHaveURL(/\/revisions\/[A-Z]+$/);
	page.on('request', (request) => {
		if (request.resourceType() === 'script') scripts.push(request.url());
	});
	await page.reload({ waitUntil: 'networkidle' });
	expect(scripts).toEqual([]);
	await expect(page.locator('script')).toHaveCount(0);
	const digest = (await page.locator('.digest').innerText()).replaceAll(/\s/g, '');
	expect(digest).toMatch(/^[0-9a-f]{64}$/);
	const bands = digest.replaceAll(/\D/g, '').slice(0, 5).split('').join(' ');
	await expect(page.getByRole('img', { name: `Seal ${bands}` }).first()).toBeVisible();
	for (const meaning of ['Prepared', 'Checked', 'Approved']) {
		await expect(
			page.getByRole('row', { name: new RegExp(`^${meaning}.* .+ UTC$`) }),
		).toBeVisible();
	}
});

test('a frozen revision prints dark on white, without the bench, numbered at the foot', async ({
	page,
}) => {
	await page.emulateMedia({ media: 'print', colorScheme: 'dark' });
	await signIn(page, 'reader');
	await page.locator('tbody td.title a').first().click();
	await expect(page).toHaveURL(/\/revisions\/[A-Z]+$/);
	const style = (property: string) =>
		page
			.locator('body')
			.evaluate((body, name) => getComputedStyle(body).getPropertyValue(name), property);
	expect(await style('background-color')).toBe('rgb(255, 255, 255)');
	expect(await style('color')).toBe('rgb(0, 0, 0)');
	await expect(page.getByRole('navigation', { name: 'Main' })).toBeHidden();
	await expect(page.getByLabel('Title block')).toBeVisible();
	const rules = (await page.locator('head style').allTextContents()).join('');
	expect(rules).toContain('"Page " counter(page) " of " counter(pages)');
	const number = new URL(page.url()).pathname.split('/')[2]!;
	expect(rules).toContain(`"${number}, revision `);
});

test('signing in, filtering and reading work without scripts', async ({ browser }) => {
	const context = await browser.newContext({ javaScriptEnabled: false });
	const page = await context.newPage();
	await page.goto('/sign-in');
	await page.getByLabel('E-mail').fill(emailOf('engineer'));
	await page.getByLabel('Password').fill('wrong');
	await page.getByRole('button', { name: 'Sign in' }).click();
	await expect(page.getByLabel('E-mail')).toHaveValue(emailOf('engineer'));
	await page.getByLabel('Password').fill(demoPassword);
	await page.getByRole('button', { name: 'Sign in' }).click();
	await expect(page).toHaveURL(/\/notes$/);
	await page.getByRole('link', { name: 'Frozen', exact: true }).click();
	expect(new Set(await column(page, 'state'))).toEqual(new Set(['Frozen']));
	await context.close();
});

test('a token is shown once, reads a note in its person’s name and ends when it is revoked', async ({
	page,
	context,
	request,
}) => {
	await context.grantPermissions(['clipboard-read', 'clipboard-write']);
	await signIn(page, 'engineer');
	const note = `/api/v1/notes/${(await column(page, 'number'))[0]!}`;
	await page.goto('/account');
	await page.getByLabel('Name', { exact: true }).fill('   ');
	await page.getByRole('button', { name: 'Create token' }).click();
	await expect(page.getByRole('alert')).toContainText('Name the token');
	await page.getByLabel('Name', { exact: true }).fill('Climate chamber 2');
	await page.getByLabel('Lasts').selectOption('a year');
	await page.getByRole('button', { name: 'Create token' }).click();
	const token = await page.getByLabel('New token', { exact: true }).inputValue();
	expect(token).toMatch(/^hd_[\w-]{43}$/);
	await page.getByRole('button', { name: 'Copy' }).click();
	await expect(page.getByRole('button', { name: 'Copied' })).toBeVisible();
	expect(await page.evaluate(() => navigator.clipboard.readText())).toBe(token);
	await expect(page.getByLabel('Name', { exact: true })).toHaveValue('');
	await shoot(page, 'account-token');

	const row = page.getByRole('listitem').filter({ hasText: 'Climate chamber 2' });
	await expect(row).toContainText('not used yet');
	const ask = () => request.get(note, { headers: { authorization: `Bearer ${token}` } });
	expect((await ask()).status()).toBe(200);
	await page.reload();
	expect(await page.content()).not.toContain(token);
	await expect(row).toContainText('used just now');
	await row.getByRole('button', { name: 'Revoke' }).click();
	await expect(page.getByRole('status')).toHaveText('“Climate chamber 2” is revoked.');
	await expect(row).toHaveCount(0);
	expect((await ask()).status()).toBe(401);
});

test('a token is made and revoked without scripts', async ({ browser }) => {
	const context = await browser.newContext({ javaScriptEnabled: false });
	const page = await context.newPage();
	await page.goto('/sign-in?to=/account');
	await page.getByLabel('E-mail').fill(emailOf('peer'));
	await page.getByLabel('Password').fill(demoPassword);
	await page.getByRole('button', { name: 'Sign in' }).click();
	await page.getByLabel('Name', { exact: true }).fill('Logger');
	await page.getByRole('button', { name: 'Create token' }).click();
	await expect(page.getByLabel('New token', { exact: true })).toHaveValue(/^hd_[\w-]{43}$/);
	await expect(page.getByRole('button', { name: 'Copy' })).toHaveCount(0);
	await page.getByRole('listitem').filter({ hasText: 'Logger' }).getByRole('button').click();
	await expect(page.getByRole('status')).toHaveText('“Logger” is revoked.');
	await context.close();
});

test('only an administrator finds the team', async ({ page, browser }) => {
	await signIn(page, 'engineer');
	await expect(page.getByRole('link', { name: 'Team' })).toHaveCount(0);
	expect((await page.goto('/team'))!.status()).toBe(403);
	await expect(page.getByRole('link', { name: 'Back to the notes' })).toBeVisible();
	const context = await browser.newContext();
	const administrator = await context.newPage();
	await signIn(administrator, 'administrator');
	await administrator.getByRole('link', { name: 'Team' }).click();
	await expect(administrator.getByText(emailOf('reader'))).toBeVisible();
	await context.close();
});

test('no page is wider than a phone', async ({ page }) => {
	await page.setViewportSize({ width: 390, height: 844 });
	const tooWide = () =>
		page.evaluate(
			() => document.documentElement.scrollWidth - document.documentElement.clientWidth,
		);
	await page.goto('/sign-in');
	expect(await tooWide()).toBe(0);
	await signIn(page, 'administrator');
	for (const path of ['/notes', '/account', '/team', '/no-such-page']) {
		await page.goto(path);
		expect(await tooWide(), path).toBe(0);
	}
	await page.goto('/notes?state=frozen');
	const number = (await column(page, 'number'))[0]!;
	const revision = (await column(page, 'revision'))[0]!.trim();
	await page.goto(`/notes/${number}/revisions/${revision}`);
	await expect(page.getByLabel('Title block')).toBeVisible();
	expect(await tooWide(), 'revision').toBe(0);
});

test('pictures are kept of the pages beside the notes', async ({ page }) => {
	await page.goto('/sign-in');
	await expect(page.getByRole('button', { name: 'Sign in' })).toBeVisible();
	await shoot(page, 'sign-in');
	await signIn(page, 'administrator');
	for (const path of ['/account', '/team', '/no-such-page']) {
		await page.goto(path);
		await expect(page.getByRole('heading', { level: 1 })).toBeVisible();
		await shoot(page, path.slice(1));
	}
});

test("a note's page runs without an error in the console", async ({ page }) => {
	const errors: string[] = [];
	page.on('console', (message) => message.type() === 'error' && errors.push(message.text()));
	page.on('pageerror', ({ message }) => errors.push(message));
	await signIn(page, 'engineer');
	await page.goto('/notes/MN-001');
	await expect(page.locator('[data-saving]')).toHaveText(/^Saved/);
	expect(await page.locator('link[rel=expect]').getAttribute('blocking')).toBe('render');
	expect(errors).toEqual([]);
});
