import AxeBuilder from '@axe-core/playwright';
import { expect, type Page } from '@playwright/test';

/** Holds a page as it is now against the rules of axe, in light and in dark. */
export async function expectAccessible(page: Page, what: string): Promise<void> {
	const found: string[] = [];
	await page.emulateMedia({ colorScheme: 'light', reducedMotion: 'reduce' });
	found.push(...(await violations(page, (axe) => axe)));
	// Nothing but colours is different in the dark.
	await page.emulateMedia({ colorScheme: 'dark', reducedMotion: 'reduce' });
	await page.evaluate(
		() => new Promise((resolve) => requestAnimationFrame(() => requestAnimationFrame(resolve))),
	);
	found.push(...(await violations(page, (axe) => axe.withRules(['color-contrast']))));
	await page.emulateMedia({ colorScheme: 'light', reducedMotion: 'reduce' });
	expect(found, what).toEqual([]);
}

async function violations(page: Page, of: (axe: AxeBuilder) => AxeBuilder): Promise<string[]> {
	const axe = new AxeBuilder({ page }).options({ rules: { 'target-size': { enabled: true } } });
	const result = await of(axe.setLegacyMode(true)).analyze();
	return result.violations.flatMap(({ id, nodes }) =>
		nodes.map(({ target, failureSummary }) => `${id}: ${target.join(' ')}: ${failureSummary}`),
	);
}
