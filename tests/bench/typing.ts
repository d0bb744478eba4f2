import type { Browser, BrowserContext, Page } from '@playwright/test';
import { openBareEditor } from './bare-editor';
import { keyWork, type KeyWork } from './key-work';
import { hasProcessorToSpare, onOwnProcessor } from './own-processor';
import { quantile, row, type Row } from './row';

/** A note of 2,000 worked lines in 40 sections; every fifth line is an input of those behind it. */
export const longNote = Array.from({ length: 40 }, (_, at) => [
	{ kind: 'text' as const, source: `## Stage ${at}\n\nIts last tap reads {{x${at}_49}}.` },
	{ kind: 'calculation' as const, source: lines(50, `x${at}`) },
]).flat();

/** A note with one cell of 300 lines. */
export const longCell = [{ kind: 'calculation' as const, source: lines(300, 'y') }];

function lines(count: number, name: string): string {
	return Array.from({ length: count }, (_, at) =>
		at % 5 === 0 ? `${name}_${at} = ${at + 1} mV` : `${name}_${at} = ${name}_${at - 1} * 2 + 1 mV`,
	).join('\n');
}

/** Long enough for the server's figures to come back before the next key. */
const pauseMs = 200;
/** A figure of an input goes to and fro, so that each key gives other figures. */
const keys = Array.from({ length: 200 }, (_, at) => (at % 2 === 0 ? '7' : 'Backspace'));
const warmUp = 4;
/** While the first ones are typed, the browser compiles what each key runs, on the same processors. */
const firstKeys = 100;

const spans = {
	first: `the first ${firstKeys} keys`,
	further: `keys ${firstKeys + 1} to ${keys.length}`,
};

interface Typed {
	first: KeyWork[];
	further: KeyWork[];
}

/** Work of the page for each key in a long note, and in a long cell. */
export async function typingRows(
	browser: Browser,
	context: BrowserContext,
	paths: { longNote: string; longCell: string },
): Promise<Row[]> {
	const openBare = () => openBareEditor(context, lines(300, 'y'));
	const places = [
		{
			id: 'page.key-2000-lines',
			where: 'a note of 2,000 lines',
			name: 'x0_5',
			open: () => openNote(paths.longNote),
		},
		{
			id: 'page.key-300-line-cell',
			where: 'a cell of 300 lines',
			name: 'y_5',
			open: () => openNote(paths.longCell),
		},
	];
	const rows: Row[] = [];
	const bare = await typed(await openBare(), 'y_5');
	for (const { id, where, name, open } of places)
		rows.push(...rowsOf(id, where, await typed(await open(), name), bare));
	if (!hasProcessorToSpare) {
		process.stdout.write('no processor to spare for the page alone: its rows are left out\n');
		return rows;
	}
	const bareAlone = await typed(await openBare(), 'y_5', onOwnProcessor);
	for (const { id, where, name, open } of places)
		rows.push(...rowsAlone(id, where, await typed(await open(), name, onOwnProcessor), bareAlone));
	return rows;

	async function openNote(path: string): Promise<Page> {
		const page = await context.newPage();
		await page.goto(path, { waitUntil: 'networkidle' });
		return page;
	}

	async function typed(
		page: Page,
		name: string,
		on: typeof onOwnProcessor = (work) => work(),
	): Promise<Typed> {
		await page.locator('.cm-line', { hasText: `${name} =` }).click();
		await page.keyboard.press('End');
		for (let sign = 0; sign < ' mV'.length; sign++) await page.keyboard.press('ArrowLeft');
		const work = await on(() => keyWork(browser, page, keys, pauseMs));
		await page.close();
		return { first: work.slice(warmUp, firstKeys), further: work.slice(firstKeys) };
	}
}

/** The same keys while the page's main thread has a processor of its own. */
function rowsAlone(id: string, where: string, work: Typed, bare: Typed): Row[] {
	return (['first', 'further'] as const).map((part) =>
		row({
			id: `${id}-alone-${part}`,
			what: `main thread from a key to the next paint, 95 of 100 of ${spans[part]}, ${where}, the page's main thread on a processor of its own; peer: a bare editor with 300 lines, likewise`,
			value: of(work[part], 0.95, 'toPaint'),
			peer: of(bare[part], 0.95, 'toPaint'),
			unit: 'ms',
			target: 16,
		}),
	);
}

/** The time below which this share of the keys lies. */
function of(keys: readonly KeyWork[], share: number, what: keyof KeyWork): number {
	return quantile(
		keys.map((one) => one[what]),
		share,
	);
}

function rowsOf(id: string, where: string, work: Typed, bare: Typed): Row[] {
	const beside = (part: keyof Typed, share: number, what: keyof KeyWork) => ({
		value: of(work[part], share, what),
		peer: of(bare[part], share, what),
		unit: 'ms',
	});
	return [
		row({
			id,
			what: `main thread from a key to the next paint, 95 of the first 100 keys, ${where}; peer: a bare editor with 300 lines`,
			...beside('first', 0.95, 'toPaint'),
			target: 16,
		}),
		row({
			id: `${id}-further`,
			what: `the same, 95 of 100 of ${spans.further}, ${where}`,
			...beside('further', 0.95, 'toPaint'),
			target: 16,
		}),
		row({
			id: `${id}-median`,
			what: `the same, median of the first 100 keys, ${where}`,
			...beside('first', 0.5, 'toPaint'),
		}),
		row({
			id: `${id}-processor`,
			what: `the same on the processor, 95 of the first 100 keys, ${where}`,
			...beside('first', 0.95, 'toPaintProcessor'),
			target: 16,
		}),
		row({
			id: `${id}-further-processor`,
			what: `the same on the processor, 95 of 100 of ${spans.further}, ${where}`,
			...beside('further', 0.95, 'toPaintProcessor'),
			target: 16,
		}),
		row({
			id: `${id}-processor-median`,
			what: `the same on the processor, median of the first 100 keys, ${where}`,
			...beside('first', 0.5, 'toPaintProcessor'),
		}),
		row({
			id: `${id}-all`,
			what: `main thread for a key, the server's figures and all that follows, median of the first 100 keys, ${where}`,
			value: of(work.first, 0.5, 'all'),
			unit: 'ms',
		}),
	];
}
