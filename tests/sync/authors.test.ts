import { afterAll, beforeAll, expect, test } from 'vitest';
import * as Y from 'yjs';
import { placedCells } from '$lib/note/document';
import { messageType, type Authors } from '$lib/protocol/messages';
import { loadDocument } from '$lib/server/notes/updates';
import { eventually, openPage, saved, type } from '../support/page';
import { makeMember, signIn } from '../support/people';
import { RawSocket } from '../support/raw-socket';
import { startSyncServer, type SyncServer } from '../support/server';
import { startSyncBench, type SyncBench } from '../support/sync';

let bench: SyncBench;
let second: SyncServer;
let cookie: string;
beforeAll(async () => {
	bench = await startSyncBench();
	second = await startSyncServer();
	cookie = await signIn(await makeMember(bench.engineer, 'engineer', 'Ben Example'));
});
afterAll(async () => {
	await second.stop();
	await bench.close();
});

/** Who wrote last in each cell, as a socket was told. */
function told(socket: RawSocket): Record<string, string> {
	const cells = Object.assign(
		{},
		...socket.bodies<Authors>(messageType.authors).map((message) => message.cells),
	) as Authors['cells'];
	return Object.fromEntries(Object.entries(cells).map(([id, { name }]) => [id, name]));
}

test('who wrote last in a cell is told at the beginning and after each commit, on every process', async () => {
	const noteId = await bench.makeNote();
	const page = await openPage(bench.server, { noteId, cookie });
	const cellId = page.cells[0]!.id;
	const here = await new RawSocket(bench.server, noteId, { cookie: bench.cookie }).greeted();
	const there = await new RawSocket(second, noteId, { cookie: bench.cookie }).greeted();
	await eventually(() => told(there)[cellId] === bench.engineer.name);
	type(page, cellId, 'R = 1 ohm\n');
	await saved(page);
	for (const socket of [here, there]) {
		await eventually(() => told(socket)[cellId] === 'Ben Example');
	}
	const late = await new RawSocket(second, noteId, { cookie: bench.cookie }).greeted();
	await eventually(() => told(late)[cellId] === 'Ben Example');
	for (const socket of [here, there, late]) await socket.close();
	page.destroy();
});

test('an edit that waited for somebody else’s counts as its own author’s when it becomes whole', async () => {
	const noteId = await bench.makeNote();
	const { doc } = await loadDocument(noteId);
	const { id, text } = placedCells(doc)[0]!;
	const of = (from: Y.Doc, change: (source: Y.Text) => void) => {
		const copy = new Y.Doc();
		Y.applyUpdate(copy, Y.encodeStateAsUpdate(from));
		const before = Y.encodeStateVector(copy);
		change(placedCells(copy)[0]!.text);
		return { copy, bytes: Y.encodeStateAsUpdate(copy, before) };
	};
	// The engineer's edit comes first to the server; Ben wrote behind it and is heard before.
	const first = of(doc, (source) => source.insert(text.length, 'R = 1 ohm\n'));
	const behind = of(first.copy, (source) => source.insert(source.length, 'I = U / R\n'));
	const ben = await new RawSocket(bench.server, noteId, { cookie }).greeted();
	const engineer = await new RawSocket(bench.server, noteId, { cookie: bench.cookie }).greeted();
	await ben.save('behind', behind.bytes);
	await engineer.save('first', first.bytes);
	await eventually(() => told(engineer)[id] === 'Ben Example');
	expect((await loadDocument(noteId)).pending).toBe(false);
	await ben.close();
	await engineer.close();
});
