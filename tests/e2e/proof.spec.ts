import { expect, test } from '@playwright/test';
import { signIn } from '../support/browser';
import { shoot } from '../support/screens';

test.describe('The page of proofs, without script', () => {
	test.use({ javaScriptEnabled: false });

	test('lists every published case with its figures, for strangers too', async ({ page }) => {
		const answer = await page.goto('/handbook/proof');
		expect(answer?.status()).toBe(200);
		await expect(page.getByRole('heading', { name: 'Proof', level: 1 })).toBeVisible();
		await expect(page.locator('script')).toHaveCount(0);
		const counts = await page.locator('dl dd').allInnerTexts();
		const [cases = 0, figures = 0, agree = 0, off = 1] = counts.map(Number);
		expect(off).toBe(0);
		expect(agree).toBe(figures);
		await expect(page.locator('section h3')).toHaveCount(cases);
		await expect(page.locator('tbody tr')).toHaveCount(figures);
		await page.getByRole('link', { name: 'Conformity with limits' }).click();
		await expect(page).toHaveURL(/#conformity$/);
		const oil = page
			.getByRole('table', { name: /motor oil/ })
			.getByRole('row')
			.nth(1);
		await expect(oil).toContainText('0.66');
		await expect(oil).toContainText('0.66263');
		await expect(oil).toContainText('every printed digit');
	});

	test('stays within its width', async ({ page }) => {
		await page.goto('/handbook/proof');
		for (const width of [1400, 1190, 1024, 890, 390, 320]) {
			await page.setViewportSize({ width, height: 800 });
			expect(
				await page.evaluate(() => document.documentElement.scrollWidth),
				String(width),
			).toBeLessThanOrEqual(width);
		}
		await page.setViewportSize({ width: 1400, height: 900 });
		await shoot(page, 'proof', { whole: false });
	});
});

test('is reached from the menu of the person', async ({ page }) => {
	await signIn(page, 'engineer');
	await page.getByRole('button', { name: /: menu$/ }).click();
	await page.getByRole('link', { name: 'Proof of the figures' }).click();
	await expect(page.getByRole('heading', { name: 'Proof', level: 1 })).toBeVisible();
});
