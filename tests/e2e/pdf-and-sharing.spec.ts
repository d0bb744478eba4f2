import { spawnSync } from 'node:child_process';
import { readFileSync, writeFileSync } from 'node:fs';
import { expect, test } from '@playwright/test';
import { expectAccessible } from '../support/accessible';
import { signIn } from '../support/browser';
import { hasPoppler, lookInto } from '../support/pdf';
import { shoot } from '../support/screens';

const revision = '/notes/MN-001/revisions/B';

test('a frozen revision is taken as a PDF, verified, and refused when its record is altered', async ({
	page,
}, info) => {
	await signIn(page, 'reader');
	await page.goto(revision);
	const address = await page.getByRole('link', { name: 'PDF', exact: true }).getAttribute('href');
	const answer = await page.request.get(address ?? '');
	expect(answer.headers()['content-type']).toBe('application/pdf');
	const pdf = await answer.body();
	const file = info.outputPath('MN-001-B.pdf');
	writeFileSync(file, pdf);

	await page.goto('/verify');
	const outcome = page.getByRole('status', { name: 'Outcome' });
	await page.getByLabel(/Drop the PDF or JSON/).setInputFiles(file);
	await expect(outcome).toContainText('Valid and current');
	await expect(outcome).toContainText('byte for byte, what this installation makes of the record');
	await shoot(page, 'verify-pdf');

	const resaved = info.outputPath('resaved.pdf');
	writeFileSync(resaved, Buffer.concat([pdf, Buffer.from('\n% saved anew\n')]));
	await page.getByLabel(/Drop the PDF or JSON/).setInputFiles(resaved);
	await expect(outcome).toContainText('The pages are not proven');

	if (!hasPoppler()) return;
	const { text, attached } = lookInto(pdf);
	expect(text).toContain('Station battery voltage channel');
	expect(text).toMatch(/\b1 of \d/);
	const record = info.outputPath('record.json');
	writeFileSync(record, attached.replace('470 kohm', '471 kohm'));
	await page.getByLabel(/Drop the PDF or JSON/).setInputFiles(record);
	await expect(outcome).toContainText('Altered');
	// Every page as a picture, to be looked at.
	const { status } = spawnSync('pdftoppm', ['-r', '70', '-png', file, info.outputPath('paper')]);
	expect(status).toBe(0);
	expect(readFileSync(info.outputPath('paper-1.png')).length).toBeGreaterThan(20_000);
});

test('a link shows one revision to a stranger without a script, with its password, until it is revoked', async ({
	page,
	browser,
	baseURL,
}) => {
	await signIn(page, 'engineer');
	await page.goto(revision);
	await page.getByText('Share this revision').click();
	await page.getByLabel('For whom').fill('The buyers');
	await page.getByLabel('Password, where one is wanted').fill('plaice-anvil-51');
	await page.getByRole('button', { name: 'Make a link' }).click();
	const made = page.getByLabel('New link');
	await expect(made).toHaveValue(/\/shared\/[\w-]{43}$/);
	const path = new URL(await made.inputValue()).pathname;
	await expectAccessible(page, 'a link that was made');
	await shoot(page, 'share');

	const context = await browser.newContext({
		javaScriptEnabled: false,
		...(baseURL !== undefined && { baseURL }),
		viewport: { width: 1024, height: 800 },
	});
	const stranger = await context.newPage();
	await stranger.goto(path);
	await expect(stranger.getByText('Station battery')).toHaveCount(0);
	await stranger.getByLabel('Password').fill('not this one');
	await stranger.getByRole('button', { name: 'Show the revision' }).click();
	await expect(stranger.getByRole('alert')).toHaveText('The password is wrong.');
	await stranger.getByLabel('Password').fill('plaice-anvil-51');
	await stranger.getByRole('button', { name: 'Show the revision' }).click();
	await expect(
		stranger.getByRole('heading', { name: 'Station battery voltage channel' }),
	).toBeVisible();
	await expect(stranger.getByText('Current.')).toBeVisible();
	await shoot(stranger, 'shared');
	const pdf = await stranger.getByRole('link', { name: 'PDF', exact: true }).getAttribute('href');
	expect((await (await context.request.get(pdf ?? '')).body()).subarray(0, 5).toString()).toBe(
		'%PDF-',
	);

	await page.goto(path);
	await expectAccessible(page, 'a shared revision that asks for its password');
	await page.getByLabel('Password').fill('plaice-anvil-51');
	await page.getByRole('button', { name: 'Show the revision' }).click();
	await expect(page.getByText('Current.')).toBeVisible();
	await expectAccessible(page, 'a shared revision');

	// The code on paper says it without the link, and shows nothing of the note.
	const code = await stranger.getByRole('link', { name: /QR code/ }).getAttribute('href');
	await stranger.goto(new URL(code ?? '').pathname);
	await expect(stranger.getByRole('status')).toContainText('Valid and current');
	await expect(stranger.getByText('Station battery')).toHaveCount(0);
	await shoot(stranger, 'code-on-paper');
	await page.goto(stranger.url());
	await expectAccessible(page, 'the code on paper');
	await page.goto(revision);
	await page.getByText('Share this revision').click();

	await page.getByRole('form', { name: 'Link for The buyers' }).getByRole('button').click();
	await expect(page.getByText('“The buyers” is revoked.')).toBeVisible();
	await stranger.goto(path);
	await expect(stranger.getByText('This link leads nowhere')).toBeVisible();
	await context.close();
});
