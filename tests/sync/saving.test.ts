import { asc, eq } from 'drizzle-orm';
import { afterAll, beforeAll, expect, test } from 'vitest';
import * as Y from 'yjs';
import { db } from '$lib/server/db/client';
import { noteUpdate } from '$lib/server/db/schema/notes';
import { closeCode } from '$lib/protocol/closing';
import { encodeEdit, messageType, type Saved } from '$lib/protocol/messages';
import { append } from '$lib/server/notes/append';
import { contentOf, eventually, openPage, saved, storedContent, type } from '../support/page';
import { startProxy } from '../support/proxy';
import { RawSocket } from '../support/raw-socket';
import { startSyncServer, syncUrl } from '../support/server';
import { startSyncBench, type SyncBench } from '../support/sync';

let bench: SyncBench;
beforeAll(async () => {
	bench = await startSyncBench();
});
afterAll(() => bench.close());

const rowsOf = (noteId: string) =>
	db().select().from(noteUpdate).where(eq(noteUpdate.noteId, noteId)).orderBy(asc(noteUpdate.seq));

test('what a page calls saved is in the database, under the name of who wrote it', async () => {
	const noteId = await bench.makeNote();
	const page = await openPage(bench.server, { noteId, cookie: bench.cookie });
	type(page, page.cells[0]!.id, 'R = 2 kohm\n');
	expect(page.saving).toMatchObject({ state: 'saving', count: 1 });
	await saved(page);
	expect(await storedContent(noteId)).toEqual(contentOf(page));
	expect(contentOf(page).cells[0]!.source).toBe('U = 5 V\nR = 2 kohm\n');
	const by = bench.engineer.personId;
	expect((await rowsOf(noteId)).map((row) => [row.seq, row.personId])).toEqual([
		[1, by],
		[2, by],
	]);
	page.destroy();
});

test('an edit that is sent twice under one id is stored once', async () => {
	const noteId = await bench.makeNote();
	const socket = await new RawSocket(bench.server, noteId, { cookie: bench.cookie }).greeted();
	const doc = new Y.Doc();
	doc.getText('title').insert(0, 'Twice ');
	const update = Y.encodeStateAsUpdate(doc);
	await socket.save('same-id', update);
	await socket.save('same-id', update);
	await socket.close();
	expect((await rowsOf(noteId)).map((row) => row.clientEditId)).toEqual(['seed', 'same-id']);
});

test('an append that is repeated, alone or among new edits, adds no row and no gap', async () => {
	const noteId = await bench.makeNote();
	const edit = (id: string) => ({
		id,
		personId: bench.engineer.personId,
		bytes: Y.encodeStateAsUpdate(new Y.Doc()),
		clients: [],
		cells: [],
	});
	await append(noteId, [edit('a'), edit('b')]);
	expect(await append(noteId, [edit('a'), edit('b')])).toMatchObject({ seq: 3, first: undefined });
	expect(await append(noteId, [edit('b'), edit('c'), edit('c')])).toMatchObject({
		seq: 4,
		first: 4,
	});
	expect((await rowsOf(noteId)).map((row) => [row.seq, row.clientEditId])).toEqual([
		[1, 'seed'],
		[2, 'a'],
		[3, 'b'],
		[4, 'c'],
	]);
});

test('appends to one note from many sides get sequence numbers without gap or double', async () => {
	const noteId = await bench.makeNote();
	const bytes = Y.encodeStateAsUpdate(new Y.Doc());
	const personId = bench.engineer.personId;
	await Promise.all(
		Array.from({ length: 20 }, (_, index) =>
			append(noteId, [{ id: `edit-${index}`, personId, bytes, clients: [], cells: [] }]),
		),
	);
	expect((await rowsOf(noteId)).map((row) => row.seq)).toEqual(
		Array.from({ length: 21 }, (_, index) => index + 1),
	);
});

test('a killed process loses nothing it acknowledged, and the rest arrives when another one runs', async () => {
	const noteId = await bench.makeNote('');
	const doomed = await startSyncServer();
	const proxy = await startProxy(doomed.port);
	const page = await openPage({ url: syncUrl(proxy.port) }, { noteId, cookie: bench.cookie });
	const cellId = page.cells[0]!.id;
	let acknowledged = '';
	for (let line = 1; line <= 100; line += 1) {
		type(page, cellId, `a${line} = ${line}\n`);
		if (line % 10 !== 0) continue;
		await saved(page);
		acknowledged = contentOf(page).cells[0]!.source;
	}
	type(page, cellId, 'z = 1\n');
	await doomed.stop('SIGKILL');
	const stored = (await storedContent(noteId)).cells[0]!.source;
	expect(stored.startsWith(acknowledged)).toBe(true);

	await eventually(() => page.connection === 'offline');
	type(page, cellId, 'offline = 1\n');
	expect(page.saving.state).toBe('offline');
	expect(page.saving.count).toBeGreaterThanOrEqual(1);
	proxy.target = bench.server.port;
	await saved(page);
	expect(await storedContent(noteId)).toEqual(contentOf(page));
	expect(contentOf(page).cells[0]!.source).toBe(`${acknowledged}z = 1\noffline = 1\n`);
	page.destroy();
	await proxy.close();
});

test('while the database is away nothing counts as saved; when it returns everything is stored', async () => {
	const noteId = await bench.makeNote('');
	const proxy = await startProxy(Number(new URL(bench.databaseUrl).port));
	const address = new URL(bench.databaseUrl);
	address.port = String(proxy.port);
	const server = await startSyncServer({ DATABASE_URL: address.href });
	const [page, peer] = await Promise.all([
		openPage(server, { noteId, cookie: bench.cookie }),
		openPage(server, { noteId, cookie: bench.cookie }),
	]);
	proxy.cut();
	for (let line = 1; line <= 50; line += 1) type(page, page.cells[0]!.id, `a${line} = ${line}\n`);
	// The peer sees the edits at once, but they are not saved, and the page does not say so.
	await eventually(() => contentOf(peer).cells[0]!.source.includes('a50 = 50'));
	expect(page.saving.state).toBe('saving');
	expect(page.saving.count).toBeGreaterThan(0);
	expect((await storedContent(noteId)).cells[0]!.source).toBe('');
	proxy.mend();
	await saved(page);
	expect(page.connection).toBe('online');
	expect(await storedContent(noteId)).toEqual(contentOf(page));
	page.destroy();
	peer.destroy();
	expect(await server.stop()).toBe(0);
	await proxy.close();
});

test('a process that is asked to end stores what it took, says so, and asks pages to come back', async () => {
	const noteId = await bench.makeNote('');
	const server = await startSyncServer();
	const socket = await new RawSocket(server, noteId, { cookie: bench.cookie }).greeted();
	const doc = new Y.Doc();
	doc.getText('title').insert(0, 'Last words ');
	socket.send(encodeEdit('last', Y.encodeStateAsUpdate(doc)));
	await eventually(() => socket.bodies<Saved>(messageType.saved).length > 0);
	const ending = server.stop();
	expect(await socket.end()).toBe(closeCode.restarting);
	expect(await ending).toBe(0);
	expect((await storedContent(noteId)).title).toContain('Last words');
});

test('an edit that two tabs send at once is stored once, and both hear of it', async () => {
	const noteId = await bench.makeNote('');
	const cookie = bench.cookie;
	const [one, other] = await Promise.all([
		new RawSocket(bench.server, noteId, { cookie }).greeted(),
		new RawSocket(bench.server, noteId, { cookie }).greeted(),
	]);
	const doc = new Y.Doc();
	doc.getText('title').insert(0, 'Twice ');
	const message = encodeEdit('twice', Y.encodeStateAsUpdate(doc));
	one.send(message);
	other.send(message);
	const heard = (socket: RawSocket) =>
		socket.bodies<Saved>(messageType.saved).some(({ ids }) => ids.includes('twice'));
	await eventually(() => heard(one) && heard(other));
	expect((await storedContent(noteId)).title.split('Twice')).toHaveLength(2);
	await Promise.all([one.close(), other.close()]);
});
