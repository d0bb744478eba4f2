import type { Page } from '@playwright/test';

type Form = readonly [width: number, scheme: 'light' | 'dark'];

const all: readonly Form[] = [1400, 1024, 390].flatMap((width) => [
	[width, 'light'] as const,
	[width, 'dark'] as const,
]);
const few: readonly Form[] = [
	[1400, 'light'],
	[390, 'dark'],
];

/**
 * Saves pictures of the page as it is now, for people to look at; with `whole` of all of it, else of what a window shows.
 * Two of them, or with HALFDIGIT_SCREENS=all light and dark at three widths, which takes half of a run's time.
 */
export async function shoot(
	page: Page,
	name: string,
	{ whole = true }: { whole?: boolean } = {},
): Promise<void> {
	const before = page.viewportSize();
	for (const [width, colorScheme] of process.env.HALFDIGIT_SCREENS === 'all' ? all : few) {
		await page.setViewportSize({ width, height: width < 600 ? 844 : 900 });
		await page.emulateMedia({ colorScheme });
		await page.screenshot({
			path: `test-results/screens/${name}-${width}-${colorScheme}.png`,
			fullPage: whole,
			animations: 'disabled',
		});
	}
	await page.emulateMedia({ colorScheme: null });
	if (before) await page.setViewportSize(before);
}
