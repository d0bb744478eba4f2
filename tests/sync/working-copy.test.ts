import fc from 'fast-check';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { contentOf, eventually, openPage, saved, storedContent, type } from '../support/page';
import { startProxy } from '../support/proxy';
import { syncUrl } from '../support/server';
import { startSyncBench, type SyncBench } from '../support/sync';
import type { WorkingCopy } from '$lib/client/working-copy.svelte';

let bench: SyncBench;
beforeAll(async () => {
	bench = await startSyncBench();
});
afterAll(() => bench.close());

const open = (noteId: string) => openPage(bench.server, { noteId, cookie: bench.cookie });
const sources = (page: WorkingCopy) => page.cells.map(({ source }) => source);

test('adding, moving, copying and removing a cell are each undone and redone as one step, exactly', async () => {
	const page = await open(await bench.makeNote('a'));
	const [a] = page.cells.map(({ id }) => id) as [string];
	const states = [contentOf(page)];
	const step = (change: () => void) => {
		change();
		states.push(contentOf(page));
	};
	let b = '';
	step(() => (b = page.addCell('text', a, 'b')!));
	step(() => page.moveCell(b, null));
	step(() => page.duplicateCell(a));
	step(() => page.removeCell(a));
	step(() => page.setTitle('Another title'));
	expect(new Set(states.map((state) => JSON.stringify(state))).size).toBe(6);
	for (const state of states.slice(0, -1).reverse()) {
		expect(page.canUndo).toBe(true);
		page.undo();
		expect(contentOf(page)).toEqual(state);
		expect(page.cells).toMatchObject(state.cells);
	}
	expect(page.canUndo).toBe(false);
	for (const state of states.slice(1)) {
		expect(page.canRedo).toBe(true);
		page.redo();
		expect(contentOf(page)).toEqual(state);
	}
	page.destroy();
});

test('undo takes back only what this page did', async () => {
	const noteId = await bench.makeNote('a');
	const [page, peer] = await Promise.all([open(noteId), open(noteId)]);
	const [a] = page.cells.map(({ id }) => id) as [string];
	page.addCell('text', a, 'mine');
	await eventually(() => sources(peer).includes('mine'));
	peer.addCell('text', null, 'theirs');
	type(peer, a, ' and more');
	await eventually(() => sources(page).join() === 'theirs,a and more,mine');
	page.undo();
	expect(sources(page)).toEqual(['theirs', 'a and more']);
	await eventually(() => sources(peer).join() === 'theirs,a and more');
	page.destroy();
	peer.destroy();
});

test('a cell removed by one while another types in it comes back whole by undo', async () => {
	const noteId = await bench.makeNote('a');
	const [page, peer] = await Promise.all([open(noteId), open(noteId)]);
	const [a] = page.cells.map(({ id }) => id) as [string];
	const before = page.cells[0];
	page.removeCell(a);
	expect(page.textOf(a)).toBeUndefined();
	await eventually(() => peer.cells.length === 0);
	page.undo();
	await eventually(() => sources(peer).join() === 'a');
	// Editors are bound to the text, and this is another one.
	expect(page.cells[0]).not.toBe(before);
	type(peer, a, 'b');
	await eventually(() => page.textOf(a)?.toJSON() === 'ab');
	expect(sources(page)).toEqual(['ab']);
	page.destroy();
	peer.destroy();
});

test('typing changes a cell and not the list of cells', async () => {
	const page = await open(await bench.makeNote('a'));
	const list = page.cells;
	type(page, list[0]!.id, 'b');
	expect(page.cells).toBe(list);
	expect(list[0]!.source).toBe('ab');
	page.addCell('text', null);
	expect(page.cells).not.toBe(list);
	expect(page.cells[1]).toBe(list[0]);
	page.destroy();
});

test('a title is changed where it differs, so that what another one types in it stays', async () => {
	const noteId = await bench.makeNote();
	const [page, peer] = await Promise.all([open(noteId), open(noteId)]);
	await eventually(() => page.title === 'Divider');
	page.setTitle('My Divider');
	peer.setTitle('Divider, 12 V');
	for (const each of [page, peer]) await eventually(() => each.title === 'My Divider, 12 V');
	page.setTitle('');
	expect(page.title).toBe('');
	page.destroy();
	peer.destroy();
});

test('two pages that move one cell at once keep one copy, at one place', async () => {
	const noteId = await bench.makeNote('a');
	const [page, peer] = await Promise.all([open(noteId), open(noteId)]);
	const [a] = page.cells.map(({ id }) => id) as [string];
	const b = page.addCell('text', a, 'b')!;
	const c = page.addCell('text', b, 'c')!;
	await eventually(() => peer.cells.length === 3);
	page.moveCell(a, c);
	peer.moveCell(a, b);
	type(peer, a, '!');
	await Promise.all([saved(page), saved(peer)]);
	const stored = await storedContent(noteId);
	for (const each of [page, peer]) {
		await eventually(() => JSON.stringify(contentOf(each)) === JSON.stringify(stored));
	}
	expect(stored.cells.map(({ source }) => source).sort()).toEqual(['a!', 'b', 'c']);
	page.destroy();
	peer.destroy();
});

test('before the document is complete the page shows what it was loaded with, and nothing can be edited', async () => {
	const page = await open(await bench.makeNote('a'));
	const proxy = await startProxy(bench.server.port);
	proxy.cut();
	const { WorkingCopy } = await import('$lib/client/working-copy.svelte');
	const content = { title: 'Loaded', cells: [{ id: 'c1', kind: 'text' as const, source: 'x' }] };
	const early = new WorkingCopy({
		noteId: '',
		number: '',
		epoch: '',
		person: { id: '', name: '' },
		content,
		evaluation: page.evaluation,
	});
	expect(early).toMatchObject({ title: 'Loaded', ready: false, editable: false });
	expect(early.cells).toMatchObject(content.cells);
	expect(early.addCell('text', null)).toBeUndefined();
	expect(early.evaluation).toBe(page.evaluation);
	early.destroy();
	page.destroy();
	await proxy.close();
});

test('"saved" is never shown while an edit is not stored, however the connection comes and goes', async () => {
	const noteId = await bench.makeNote('');
	const proxy = await startProxy(bench.server.port);
	const page = await openPage({ url: syncUrl(proxy.port) }, { noteId, cookie: bench.cookie });
	const deeds = fc.sample(fc.constantFrom('type', 'type', 'type', 'cut', 'mend', 'turn'), {
		numRuns: 150,
		seed: 7,
	});
	let typed = '';
	for (const [index, deed] of deeds.entries()) {
		if (deed === 'cut') proxy.cut();
		else if (deed === 'mend') proxy.mend();
		else if (deed === 'turn') await new Promise((resolve) => setImmediate(resolve));
		else {
			type(page, page.cells[0]!.id, `${index},`);
			typed += `${index},`;
		}
		if (page.saving.state !== 'saved') continue;
		expect((await storedContent(noteId)).cells[0]!.source.length).toBeGreaterThanOrEqual(
			typed.length,
		);
	}
	proxy.mend();
	await saved(page);
	expect((await storedContent(noteId)).cells[0]!.source).toBe(typed);
	expect(contentOf(page)).toEqual(await storedContent(noteId));
	page.destroy();
	await proxy.close();
});
