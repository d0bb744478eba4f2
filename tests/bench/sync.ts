import type { BrowserContext, Page } from '@playwright/test';
import { quantile, row, type Row } from './row';
import { lastName } from './sixty-lines';

const edits = 120;
const warming = 10;
const readout = `[data-cell] [data-quantity="${lastName}"]`;

/** Instants of one edit on the clock that all pages of the machine share, in ms. */
interface Instants {
	typed: number;
	shown: number;
}

/** From a key typed in one browser to the new figure in another, on a note of 60 worked lines over loopback. */
export async function syncRows(
	writer: BrowserContext,
	watcher: BrowserContext,
	notePath: string,
): Promise<Row[]> {
	const writing = await writer.newPage();
	const watching = await watcher.newPage();
	await Promise.all([writing.goto(notePath), watching.goto(notePath)]);
	// From here on both pages have the whole document and can write.
	for (const page of [writing, watching])
		await page.locator('[data-saving="saved"]').first().waitFor();
	await watching.locator(readout).first().waitFor();
	await openFirstLine(writing);
	await writing.evaluate(noteKeys);

	const sample: number[] = [];
	for (let edit = 0; edit < edits + warming; edit++) {
		const { typed, shown } = await changeOnce(writing, watching, String(1 + (edit % 9)));
		if (edit >= warming) sample.push(shown - typed);
	}
	await writing.close();
	await watching.close();
	return [
		row({
			id: 'sync.edit-to-figure-p95',
			what: `a key in one browser to the new figure in another, p95 of ${edits} edits, 60 lines`,
			value: quantile(sample, 0.95),
			unit: 'ms',
			target: 100,
		}),
		row({
			id: 'sync.edit-to-figure-p50',
			what: 'the same, median',
			value: quantile(sample, 0.5),
			unit: 'ms',
			target: 60,
		}),
	];
}

/** Puts the cursor behind the `5` of `tap_1 = 5 V`, the first line of the first calculation. */
async function openFirstLine(page: Page): Promise<void> {
	await page.locator('[data-cell] .cm-line', { hasText: 'tap_1 =' }).first().click();
	await page.keyboard.press('Home');
	for (let step = 0; step < 'tap_1 = 5'.length; step++) await page.keyboard.press('ArrowRight');
}

/** Replaces the digit before the cursor, so that the edit is one key, and waits for what the other page makes of it. */
async function changeOnce(writing: Page, watching: Page, digit: string): Promise<Instants> {
	await writing.keyboard.press('Shift+ArrowLeft');
	await watching.evaluate(watchReadout, readout);
	await writing.keyboard.press(digit);
	const shown = await watching.evaluate(() => (window as Watching).shown);
	const typed = await writing.evaluate(() => (window as Writing).typedAt);
	if (shown === undefined || typed === undefined) throw new Error('an edit was not seen');
	return { typed, shown };
}

type Writing = Window & { typedAt?: number };
type Watching = Window & { shown?: Promise<number> };

/** Runs in the page: keeps the instant of the newest key. */
function noteKeys(): void {
	addEventListener(
		'keydown',
		(event) => ((window as Writing).typedAt = performance.timeOrigin + event.timeStamp),
		{ capture: true },
	);
}

/** Runs in the page: from now on, waits for another text in the readout. */
function watchReadout(selector: string): void {
	const element = document.querySelector(selector);
	const before = element?.textContent;
	(window as Watching).shown = new Promise((resolve, reject) => {
		const limit = setTimeout(() => reject(new Error('no new figure within 30 s')), 30_000);
		const observer = new MutationObserver(() => {
			if (document.querySelector(selector)?.textContent === before) return;
			observer.disconnect();
			clearTimeout(limit);
			resolve(performance.timeOrigin + performance.now());
		});
		observer.observe(document.body, { subtree: true, childList: true, characterData: true });
	});
}
