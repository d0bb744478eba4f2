import { expect, test } from '@playwright/test';
import { addCell, demoPassword, emailOf, figure, newNote, signIn } from '../support/browser';

const bad: [line: string, codes: string[]][] = [
	['unknown = nowhere + 1', ['unknownName']],
	['mixed = 1 V + 1 A', ['dimension']],
	['round_1 = round_2 + 1', ['circle']],
	['round_2 = round_1 + 1', ['circle']],
	['good = 3', ['duplicate']],
	['huge = 10 ^ 400', ['overflow']],
	['f(n) = f(n + 1)', []],
	['endless = f(1)', ['tooLong', 'tooDeep']],
	['giant = zeros(100000, 100000)', ['tooLarge', 'unknownName']],
	['many = sum(1:1e9)', ['tooLarge']],
	[`deep = ${'('.repeat(400)}1${')'.repeat(400)}`, ['tooDeep']],
	['V = 3', ['reserved']],
	['half = (1 + ', ['syntax']],
];

test('each wrong line says so by itself, and the rest of the note is computed', async ({
	page,
}) => {
	await signIn(page, 'engineer');
	await newNote(page, 'Wrong lines');
	const begun = Date.now();
	await addCell(
		page,
		'calculation',
		['good = 2 V', ...bad.map(([line]) => line), 'last = good * 2'].join('\n'),
	);
	await expect(figure(page, 'last')).toHaveText(/4\s*V/);
	const cell = page.locator('[data-kind=calculation]');
	for (const [line, codes] of bad) {
		if (codes.length === 0) continue;
		const fault = cell.locator(codes.map((code) => `[data-fault=${code}]`).join(', '));
		await expect(fault.first(), line.slice(0, 40)).toBeVisible();
		await expect(fault.first()).not.toBeEmpty();
	}
	// As `V` is tried as a name, the `2 V` of the first line could be misread, and says so.
	await expect(cell.locator('[data-fault=ambiguous]')).toBeVisible();
	const wrong = bad.filter(([, codes]) => codes.length > 0).length;
	await expect(cell.locator('[data-fault]')).toHaveCount(wrong + 1);
	test
		.info()
		.annotations.push({ type: 'all shown after', description: `${Date.now() - begun} ms` });

	// The note stays editable, and what was typed is stored.
	await cell.locator('.cm-line', { hasText: 'last =' }).click();
	await page.keyboard.press('End');
	await page.keyboard.type('1');
	await expect(figure(page, 'last')).toHaveText(/42\s*V/);
	await expect(page.locator('[data-saving]')).toHaveText(/^Saved/);
	await page.reload();
	await expect(cell).toContainText('unknown');
	// The end of the cell may lie below the window; the register has all names.
	await expect(page.getByRole('link', { name: /^last, 42\sV$/ })).toBeVisible();
});

test('what is typed before the scripts of a page run stays in its fields', async ({ page }) => {
	const held: (() => void)[] = [];
	let holds = true;
	await page.route('**/_app/**/*.js', async (route) => {
		if (holds) await new Promise<void>((resolve) => held.push(resolve));
		await route.continue();
	});
	await page.goto('/sign-in', { waitUntil: 'commit' });
	await page.getByLabel('E-mail').fill(emailOf('reader'));
	holds = false;
	for (const release of held) release();
	await page.waitForLoadState('networkidle');
	await expect(page.getByLabel('E-mail')).toHaveValue(emailOf('reader'));
	await page.getByLabel('Password').fill(demoPassword);
	await page.getByRole('button', { name: 'Sign in' }).click();
	await expect(page.getByRole('heading', { name: 'Notes', level: 1 })).toBeVisible();
});
