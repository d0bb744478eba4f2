import { expect, test } from '@playwright/test';
import { addCell, newNote, signIn } from '../support/browser';

// A trace copies the whole page at each step, which here takes longer than what is tried.
test.use({ trace: 'off' });

test('in a note of 2,000 lines only cells near the window have editors, and any cell is reached', async ({
	page,
}) => {
	await signIn(page, 'engineer');
	await newNote(page, 'Long');
	const cell = (n: number) => Array.from({ length: 400 }, (_, i) => `x${n}_${i} = ${i + n}`);
	for (let n = 1; n <= 5; n++) await addCell(page, 'calculation', cell(n).join('\n'));
	await expect(page.locator('[data-saving]')).toHaveText(/^Saved/);
	await page.reload();
	await expect(page.locator('.cm-content').first()).toBeVisible();
	const register = page.getByRole('navigation', { name: 'Register' });
	await expect(register.getByRole('button', { name: 'Show 1940 more' })).toBeVisible();
	await register.getByRole('searchbox').fill('x5_399');
	await expect(page.getByRole('link', { name: /^x5_399, 404$/ })).toBeVisible();
	await register.getByRole('searchbox').fill('');
	// A page that is loaded again goes where it was.
	await page.evaluate(() => scrollTo(0, 0));
	await expect(page.locator('.cm-line', { hasText: 'x1_5 =' })).toBeVisible();
	expect(await page.locator('.cm-content').count()).toBeLessThan(5);

	// From the key's event to the end of all work that it makes before the next frame.
	await page.locator('.cm-line', { hasText: 'x1_5 =' }).first().click();
	await page.keyboard.press('End');
	await page.evaluate(() => {
		const spent: number[] = [];
		Object.assign(window, { spent });
		new PerformanceObserver((list) => {
			for (const entry of list.getEntriesByName('keydown'))
				spent.push((entry as PerformanceEventTiming).processingEnd - entry.startTime);
		}).observe({
			type: 'event',
			durationThreshold: 16,
			buffered: false,
		} as PerformanceObserverInit);
	});
	for (let i = 0; i < 40; i++) await page.keyboard.type(i % 2 === 0 ? ' ' : '1', { delay: 60 });
	const slow = await page.evaluate(() => (window as unknown as { spent: number[] }).spent);
	test.info().annotations.push({
		type: 'keys of 40 in a note of 2,000 lines that took a frame or more, ms',
		description: slow.map((ms) => ms.toFixed(0)).join(' ') || 'none',
	});

	await page.keyboard.press('Alt+Shift+L');
	await page.getByRole('textbox', { name: 'Find', exact: true }).fill('x5_399');
	await expect(page.locator('.hit-current')).toBeVisible();
	await page.keyboard.press('Escape');
});
