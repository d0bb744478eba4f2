import 'fake-indexeddb/auto';
import { eq, sql } from 'drizzle-orm';
import fc from 'fast-check';
import { afterAll, afterEach, beforeAll, expect, test, vi } from 'vitest';
import type { WorkingCopy } from '$lib/client/working-copy.svelte';
import { listKept, wipe } from '$lib/client/unsaved-store';
import { closeCode } from '$lib/protocol/closing';
import { db } from '$lib/server/db/client';
import { note } from '$lib/server/db/schema/notes';
import { membership } from '$lib/server/db/schema/people';
import type { Actor } from '$lib/server/auth/access';
import { connectPage, contentOf, eventually, saved, storedContent, type } from '../support/page';
import { makeMember, signIn } from '../support/people';
import { startProxy, type Proxy } from '../support/proxy';
import { syncUrl } from '../support/server';
import { startSyncBench, type SyncBench } from '../support/sync';

let bench: SyncBench;
let proxy: Proxy;
beforeAll(async () => {
	bench = await startSyncBench();
	proxy = await startProxy(bench.server.port);
});
afterEach(() => proxy.mend());
afterAll(async () => {
	await proxy.close();
	await bench.close();
});

/** Opens a note as a tab of this browser does, over a line that can be cut. */
async function open(noteId: string, who: Actor = bench.engineer): Promise<WorkingCopy> {
	const page = await connectPage(
		{ url: syncUrl(proxy.port) },
		{ noteId, cookie: await signIn(who), person: { id: who.personId, name: who.name } },
	);
	await eventually(() => page.ready);
	return page;
}

const sourceOf = (page: WorkingCopy) => page.cells[0]!.source;
const storedSource = async (noteId: string) => (await storedContent(noteId)).cells[0]!.source;
const keptOf = ({ personId }: Actor) => listKept(personId);

/** Types without a connection until it is kept, and closes the tab. */
async function leaveUnsaved(noteId: string, text: string, who?: Actor): Promise<void> {
	const page = await open(noteId, who);
	await saved(page);
	proxy.cut();
	await eventually(() => page.connection === 'offline');
	for (const character of text) type(page, page.cells[0]!.id, character);
	await eventually(() => page.saving.kept === page.saving.count);
	expect(page.saving).toMatchObject({ state: 'offline', count: text.length });
	page.destroy();
	proxy.mend();
}

test('what was typed without a connection survives the closed tab and is merged on return, exactly once', async () => {
	const noteId = await bench.makeNote('a');
	await leaveUnsaved(noteId, 'bcd');
	expect(await storedSource(noteId)).toBe('a');
	expect(await keptOf(bench.engineer)).toEqual([{ number: '', changes: 3 }]);

	const peer = await open(noteId, await makeMember(bench.engineer, 'engineer'));
	type(peer, peer.cells[0]!.id, '!');
	await saved(peer);
	const [first, second] = await Promise.all([open(noteId), open(noteId)]);
	for (const page of [first, second, peer]) {
		await saved(page);
		await eventually(() => sourceOf(page).length === 5);
		expect([...sourceOf(page)].sort().join('')).toBe('!abcd');
		expect(sourceOf(page)).toContain('bcd');
	}
	expect(contentOf(first)).toEqual(await storedContent(noteId));
	await eventually(async () => (await keptOf(bench.engineer)).length === 0);
	for (const page of [first, second, peer]) page.destroy();
	const later = await open(noteId);
	await saved(later);
	expect(contentOf(later)).toEqual(await storedContent(noteId));
	later.destroy();
});

test('what is saved in time is never written down', async () => {
	const page = await open(await bench.makeNote('a'));
	const put = vi.spyOn(IDBObjectStore.prototype, 'put');
	for (let index = 0; index < 20; index += 1) {
		type(page, page.cells[0]!.id, 'b');
		await saved(page);
	}
	expect(put).not.toHaveBeenCalled();
	put.mockRestore();
	page.destroy();
});

test('two accounts of one browser never see what the other has not saved', async () => {
	const noteId = await bench.makeNote('a');
	const other = await makeMember(bench.engineer, 'engineer');
	await leaveUnsaved(noteId, 'mine');
	const page = await open(noteId, other);
	await saved(page);
	expect(sourceOf(page)).toBe('a');
	expect(await keptOf(other)).toEqual([]);
	page.destroy();
	const back = await open(noteId);
	await saved(back);
	expect(sourceOf(back)).toBe('amine');
	back.destroy();
});

test('signing out leaves nothing of the person in the browser, also where another tab is open', async () => {
	const noteId = await bench.makeNote('a');
	await leaveUnsaved(noteId, 'b');
	const page = await open(noteId);
	proxy.cut();
	await eventually(() => page.connection === 'offline');
	type(page, page.cells[0]!.id, 'c');
	await wipe(bench.engineer.personId);
	type(page, page.cells[0]!.id, 'd');
	await eventually(() => page.saving.failure);
	expect(page.saving.kept).toBe(0);
	expect(await keptOf(bench.engineer)).toEqual([]);
	page.destroy();
});

test('changes of a note that was restored from a backup are offered as text, not merged', async () => {
	const noteId = await bench.makeNote('a');
	await leaveUnsaved(noteId, 'bc');
	const witness = await open(noteId, await makeMember(bench.engineer, 'engineer'));
	await db()
		.update(note)
		.set({ epoch: sql`gen_random_uuid()` })
		.where(eq(note.id, noteId));
	await eventually(() => witness.closedWith === closeCode.otherEpoch);
	witness.destroy();
	const page = await open(noteId);
	await saved(page);
	expect(sourceOf(page)).toBe('a');
	expect(page.asides).toMatchObject([
		{ changes: 2, texts: [{ kind: 'calculation', terminal: 1, source: 'abc' }] },
	]);
	expect(page.asides[0]!.reason).toContain('restored from a backup');
	page.destroy();
	const again = await open(noteId);
	await eventually(() => again.asides.length === 1);
	again.discard(again.asides[0]!);
	await eventually(async () => (await keptOf(bench.engineer)).length === 0);
	expect(await storedSource(noteId)).toBe('a');
	again.destroy();
});

test('refused changes are offered as text with the reason, and the page takes no more', async () => {
	const who = await makeMember(bench.engineer, 'engineer');
	const noteId = await bench.makeNote('a');
	const page = await open(noteId, who);
	await saved(page);
	proxy.cut();
	await eventually(() => page.connection === 'offline');
	type(page, page.cells[0]!.id, 'b');
	page.setTitle('Another');
	await db()
		.update(membership)
		.set({ role: 'administrator' })
		.where(eq(membership.personId, who.personId));
	proxy.mend();
	await eventually(() => page.saving.state === 'refused' && page.asides[0]?.key !== undefined);
	expect(page.saving).toMatchObject({ count: 0 });
	expect(page.saving.reason).toMatch(/role/);
	expect(page.editable).toBe(false);
	expect(page.asides[0]!.texts.map(({ kind, source }) => [kind, source])).toEqual([
		['title', 'Another'],
		['calculation', 'ab'],
	]);
	page.destroy();
	const again = await open(noteId, who);
	await eventually(() => again.asides.length === 1);
	expect(again.saving.state).not.toBe('refused');
	expect(contentOf(again)).toEqual(await storedContent(noteId));
	expect(await storedSource(noteId)).toBe('a');
	again.destroy();
});

test('a browser without room says so, and the changes are saved all the same when the connection returns', async () => {
	const noteId = await bench.makeNote('a');
	const page = await open(noteId);
	await saved(page);
	proxy.cut();
	await eventually(() => page.connection === 'offline');
	const put = vi.spyOn(IDBObjectStore.prototype, 'put').mockImplementation(() => {
		throw new DOMException('full', 'QuotaExceededError');
	});
	type(page, page.cells[0]!.id, 'b');
	await eventually(() => page.saving.failure);
	expect(page.saving).toMatchObject({ state: 'offline', count: 1, kept: 0 });
	expect(page.saving.failure).toContain('no room');
	expect(page.isUnsaved).toBe(true);
	put.mockRestore();
	proxy.mend();
	await saved(page);
	expect(await storedSource(noteId)).toBe('ab');
	page.destroy();
});

const runs = Number(process.env.SAVING_RUNS ?? 2);

test(`"saved" is never shown while a change is not stored, through cuts and closed tabs (${runs} runs)`, async () => {
	const deed = fc.constantFrom('type', 'type', 'type', 'cut', 'mend', 'turn', 'close', 'wait');
	await fc.assert(
		fc.asyncProperty(fc.array(deed, { minLength: 20, maxLength: 50 }), async (deeds) => {
			proxy.mend();
			const noteId = await bench.makeNote('');
			let page = await open(noteId);
			let typed = '';
			for (const [index, what] of deeds.entries()) {
				if (what === 'cut') proxy.cut();
				else if (what === 'mend') proxy.mend();
				else if (what === 'turn') await new Promise((resolve) => setImmediate(resolve));
				else if (what === 'wait') await eventually(() => page.saving.kept === page.saving.count);
				else if (what === 'close') {
					page.destroy();
					proxy.mend();
					page = await open(noteId);
				} else {
					// The text from before a closed tab comes back a moment after the note itself.
					type(page, page.cells[0]!.id, `${index},`);
					typed += `${index},`;
				}
				if (page.saving.state !== 'saved') continue;
				expect((await storedSource(noteId)).length).toBeGreaterThanOrEqual(typed.length);
			}
			proxy.mend();
			await saved(page);
			const words = (text: string) => text.split(',').sort();
			expect(words(await storedSource(noteId))).toEqual(words(typed));
			expect(contentOf(page)).toEqual(await storedContent(noteId));
			page.destroy();
		}),
		{ numRuns: runs, seed: Number(process.env.SAVING_SEED ?? 11), endOnFailure: true },
	);
});
