import type { BrowserContext, Page } from '@playwright/test';
import { row, type Row } from './row';

/** Compressed JavaScript that a first visit of a page loads, until the page is quiet. */
export async function pageRows(
	context: BrowserContext,
	notePath: string,
	revisionPath: string,
): Promise<Row[]> {
	const noteKilobytes = await scriptKilobytes(context, notePath);
	// The note's page cannot work without; a frozen revision is read and printed without any.
	if (noteKilobytes === 0) throw new Error(`${notePath} loaded no script`);
	return [
		row({
			id: 'page.note-js',
			what: 'JavaScript of a note page, compressed',
			value: noteKilobytes,
			unit: 'kB',
			target: 350,
		}),
		row({
			id: 'page.revision-js',
			what: 'JavaScript of a frozen revision, compressed',
			value: await scriptKilobytes(context, revisionPath),
			unit: 'kB',
			target: 90,
		}),
	];
}

async function scriptKilobytes(context: BrowserContext, path: string): Promise<number> {
	const page: Page = await context.newPage();
	const devtools = await context.newCDPSession(page);
	await devtools.send('Network.enable');
	await devtools.send('Network.setCacheDisabled', { cacheDisabled: true });
	const scripts = new Set<string>();
	let bytes = 0;
	devtools.on('Network.responseReceived', ({ requestId, response }) => {
		if (/javascript/.test(response.mimeType)) scripts.add(requestId);
	});
	devtools.on('Network.loadingFinished', ({ requestId, encodedDataLength }) => {
		if (scripts.has(requestId)) bytes += encodedDataLength;
	});
	const response = await page.goto(path, { waitUntil: 'networkidle' });
	if (response?.status() !== 200) throw new Error(`${path} answers ${response?.status()}`);
	await page.close();
	return bytes / 1000;
}
