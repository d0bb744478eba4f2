import type { Page } from '@playwright/test';

const widths = [1400, 1024, 390] as const;
const wanted = process.env.HALFDIGIT_SCREENS === '1';

/**
 * Saves pictures of the page as it is now, light and dark at three widths, for people to look at; with `whole` of all of
 * it, else of what a window shows. Only when HALFDIGIT_SCREENS=1 asks for them: they take half of the run's time.
 */
export async function shoot(
	page: Page,
	name: string,
	{ whole = true }: { whole?: boolean } = {},
): Promise<void> {
	if (!wanted) return;
	const before = page.viewportSize();
	for (const width of widths) {
		await page.setViewportSize({ width, height: width < 600 ? 844 : 900 });
		for (const colorScheme of ['light', 'dark'] as const) {
			await page.emulateMedia({ colorScheme });
			await page.screenshot({
				path: `test-results/screens/${name}-${width}-${colorScheme}.png`,
				fullPage: whole,
				animations: 'disabled',
			});
		}
	}
	await page.emulateMedia({ colorScheme: null });
	if (before) await page.setViewportSize(before);
}
