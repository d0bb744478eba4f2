import { afterAll, beforeAll, expect, test } from 'vitest';
import * as snapshots from '$lib/server/notes/snapshots';
import { authorsSince, loadDocument } from '$lib/server/notes/updates';
import { contentOf, eventually, openPage, saved, storedContent, type } from '../support/page';
import { makeMember, signIn } from '../support/people';
import { startProxy } from '../support/proxy';
import { syncUrl } from '../support/server';
import { startSyncBench, type SyncBench } from '../support/sync';

let bench: SyncBench;
beforeAll(async () => {
	bench = await startSyncBench();
});
afterAll(() => bench.close());

test('a moment is restored while others type and one is offline: nobody’s words are lost or doubled, and undo takes it back', async () => {
	const noteId = await bench.makeNote('first line\n');
	const other = await makeMember(bench.engineer, 'engineer', 'Ben Example');
	const proxy = await startProxy(bench.server.port);
	const [own, peer, away] = await Promise.all([
		openPage(bench.server, { noteId, cookie: bench.cookie }),
		openPage(bench.server, { noteId, cookie: await signIn(other) }),
		openPage({ url: syncUrl(proxy.port) }, { noteId, cookie: await signIn(other) }),
	]);
	const cellId = own.cells[0]!.id;
	const moment = contentOf(own);
	type(peer, cellId, 'wrong turn\n');
	peer.setTitle('Wrong title');
	const added = peer.addCell('text', cellId, 'by mistake')!;
	await saved(peer);
	await eventually(() => away.title === 'Wrong title' && own.cells.length === 2);
	proxy.cut();
	await eventually(() => away.connection === 'offline');
	type(away, cellId, 'written offline\n');

	own.restore(moment);
	await saved(own);
	await eventually(() => peer.title === 'Divider' && peer.cells.length === 1);
	expect(await storedContent(noteId)).toEqual(moment);
	type(peer, cellId, 'after it\n');
	await saved(peer);
	proxy.mend();
	await saved(away);
	const all = ['first line', 'written offline', 'after it'];
	for (const page of [own, peer, away]) {
		await eventually(() => all.every((line) => page.cells[0]!.source.includes(line)));
	}
	const words = own.cells[0]!.source.trim().split('\n').sort();
	expect(words).toEqual([...all].sort());

	// Whoever restored takes back just that.
	own.undo();
	await saved(own);
	await eventually(() => peer.title === 'Wrong title' && peer.cells.length === 2);
	expect(peer.cells.map(({ id }) => id)).toContain(added);
	const undone = (await storedContent(noteId)).cells[0]!.source.trim().split('\n').sort();
	expect(undone).toEqual([...all, 'wrong turn'].sort());
	const seq = (await loadDocument(noteId)).seq;
	expect((await authorsSince(noteId, seq - 1)).map(({ name }) => name)).toEqual([
		bench.engineer.name,
	]);
	for (const page of [own, peer, away]) page.destroy();
	await proxy.close();
});

test('a sync process makes snapshots of a note that is worked on, and a note opens from them', async () => {
	const noteId = await bench.makeNote('');
	const page = await openPage(bench.server, { noteId, cookie: bench.cookie });
	for (let line = 0; line < snapshots.snapshotEvery + 20; line += 1) {
		type(page, page.cells[0]!.id, `a${line} = 1\n`);
		// One edit each.
		if (line % 20 === 0) await saved(page);
		await Promise.resolve();
	}
	await saved(page);
	const { seq } = await loadDocument(noteId);
	expect(seq).toBeGreaterThan(snapshots.snapshotEvery);
	await eventually(() => snapshots.newest(noteId));
	const loaded = await loadDocument(noteId);
	expect(loaded.snapshotSeq).toBeGreaterThanOrEqual(snapshots.snapshotEvery);
	expect(await storedContent(noteId)).toEqual(contentOf(page));
	page.destroy();
});
