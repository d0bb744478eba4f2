import type { BrowserContext, Page } from '@playwright/test';
import { createServer } from 'node:http';
import type { AddressInfo } from 'node:net';
import { quantile, row, type Row } from './row';

const visits = 9;
const slowDown = 4;
const warmUps = 40;
/** A new tab has Chromium load pages of its own beside it, which take the processors from the page that is measured. */
const tabSettlesMs = 2500;

interface Visit {
	/** ms from the navigation to the frame that shows the first figure. */
	figureMs: number;
	/** Sum of the layout shifts until the page was quiet. */
	shift: number;
}

/** How soon the first figure of a note is on the screen of a slow computer, and how much moves until the page is quiet. */
export async function arrivalRows(context: BrowserContext, path: string): Promise<Row[]> {
	const sample: Visit[] = [];
	const bareSample: Visit[] = [];
	const bare = await serveBarePage();
	try {
		// Its results are stored from then on, as those of every note that somebody has worked in; and the server has
		// run for a while.
		await visitOf(context, path, untilQuiet);
		for (let count = 0; count < warmUps; count++) await (await context.request.get(path)).text();
		for (let visit = 0; visit < visits; visit++) {
			sample.push(await visitOf(context, path, untilQuiet));
			bareSample.push(await visitOf(context, bare.url));
		}
	} finally {
		bare.close();
	}
	const median = (of: readonly Visit[]) =>
		quantile(
			of.map(({ figureMs }) => figureMs),
			0.5,
		);
	return [
		row({
			id: 'page.first-figure',
			what: `from navigation to the first figure of a note of 60 lines, ${slowDown} x slower CPU, median of ${visits}; peer: a page of one figure and nothing else`,
			value: median(sample),
			peer: median(bareSample),
			unit: 'ms',
			target: 1000,
		}),
		row({
			id: 'page.layout-shift',
			what: `layout shift until editors and figures are there, worst of ${visits}`,
			value: Math.max(...sample.map(({ shift }) => shift)),
			unit: '',
			target: 0.05,
		}),
	];
}

/** A page that holds one figure, without styles, fonts and scripts. */
async function serveBarePage(): Promise<{ url: string; close: () => void }> {
	const server = createServer((_, response) => {
		response.setHeader('content-type', 'text/html; charset=utf-8');
		response.end('<!doctype html><title>Bare</title><p data-quantity="tap_60">4.966 79 V');
	});
	await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
	const { port } = server.address() as AddressInfo;
	return {
		url: `http://localhost:${port}/`,
		close: () => {
			server.closeAllConnections();
			server.close();
		},
	};
}

/** Until editors and figures are there and everything is saved. */
async function untilQuiet(page: Page): Promise<void> {
	await page.locator('.cm-content').first().waitFor();
	await page.locator('[data-quantity]').first().waitFor();
	await page.locator('[data-saving]', { hasText: /^Saved/ }).waitFor();
}

async function visitOf(
	context: BrowserContext,
	path: string,
	quiet: (page: Page) => Promise<void> = () => Promise.resolve(),
): Promise<Visit> {
	const page = await context.newPage();
	const devtools = await context.newCDPSession(page);
	await devtools.send('Emulation.setCPUThrottlingRate', { rate: slowDown });
	// What runs these programs wraps named functions in a function of its own, which a page does not have.
	await page.addInitScript({ content: 'globalThis.__name = (made) => made;' });
	await page.addInitScript(() => {
		const seen = { figureMs: 0, shift: 0 };
		Object.assign(window, { seen });
		new PerformanceObserver((list) => {
			for (const entry of list.getEntries())
				seen.shift += (entry as PerformanceEntry & { value: number }).value;
		}).observe({ type: 'layout-shift', buffered: true });
		// The frame that finds a figure shows it; the callback of the next one runs when that is done.
		const look = (found: boolean) => {
			if (found) seen.figureMs = performance.now();
			else {
				requestAnimationFrame(() => {
					const isThere = document.querySelector('[data-quantity]') !== null;
					if (isThere) requestAnimationFrame(() => look(true));
					else look(false);
				});
			}
		};
		look(false);
	});
	await page.evaluate((ms) => new Promise((resolve) => setTimeout(resolve, ms)), tabSettlesMs);
	await page.goto(path, { waitUntil: 'networkidle' });
	await quiet(page);
	// Two frames later everything that the figures moved has been counted.
	await page.evaluate(
		() => new Promise((resolve) => requestAnimationFrame(() => requestAnimationFrame(resolve))),
	);
	const visit = await page.evaluate(() => {
		const { seen } = window as unknown as { seen: Visit };
		// No text at all was on the screen before, whatever the page had finished.
		const [text] = performance.getEntriesByName('first-contentful-paint');
		return { ...seen, figureMs: Math.max(seen.figureMs, text?.startTime ?? Infinity) };
	});
	await page.close();
	if (visit.figureMs === 0) throw new Error(`${path} showed no figure`);
	return visit;
}
