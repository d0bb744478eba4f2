import { expect, type Page } from '@playwright/test';

/** Most presses of Tab until a control must have been reached. */
const most = 150;

/** What a person who uses the keyboard alone meets at the focus. */
interface Met {
	name: string;
	/** Whether the focus can be seen there. */
	seen: boolean;
}

/** Goes on with Tab to the control of this name; each control on the way must show that it has the focus. */
export async function tabTo(page: Page, name: RegExp, key: 'Tab' | 'Shift+Tab' = 'Tab') {
	const met: string[] = [];
	for (let press = 0; press < most; press++) {
		await page.keyboard.press(key);
		const at = await page.evaluate(focus);
		if (!at) continue;
		expect(at.seen, `the focus is seen at “${at.name}”`).toBe(true);
		if (name.test(at.name)) return;
		met.push(at.name);
	}
	throw new Error(`no control ${name.source}; there are: ${met.join(' | ')}`);
}

function focus(): Met | undefined {
	const at = document.activeElement;
	if (!(at instanceof HTMLElement) || at === document.body) return undefined;
	const label = at.getAttribute('aria-label');
	const labelled = 'labels' in at ? (at.labels as NodeListOf<HTMLElement> | null) : null;
	const name = label ?? labelled?.[0]?.innerText ?? at.innerText;
	// An editor shows the focus by its cursor, and by the mark of the line it stands in.
	const seen =
		at.isContentEditable ||
		[undefined, '::after'].some((part) => {
			const { outlineStyle, boxShadow } = getComputedStyle(at, part);
			return outlineStyle !== 'none' || boxShadow !== 'none';
		});
	const { width, height, top, bottom } = at.getBoundingClientRect();
	const inside = width > 0 && height > 0 && bottom > 0 && top < innerHeight;
	return { name: name.trim().replace(/\s+/g, ' '), seen: seen && inside };
}
