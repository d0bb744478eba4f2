import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { WebSocket } from 'ws';
import * as Y from 'yjs';
import { closeCode, maxMessageBytes } from '$lib/protocol/closing';
import { encodeEdit, messageType, type Refused } from '$lib/protocol/messages';
import { clientsIn } from '$lib/note/touched';
import { append } from '$lib/server/notes/append';
import { loadDocument } from '$lib/server/notes/updates';
import { contentOf, eventually, openPage, saved, storedContent, type } from '../support/page';
import { RawSocket } from '../support/raw-socket';
import { startSyncServer } from '../support/server';
import { startSyncBench, type SyncBench } from '../support/sync';

let bench: SyncBench;
beforeAll(async () => {
	bench = await startSyncBench();
});
afterAll(() => bench.close());

const enter = (noteId: string) => new RawSocket(bench.server, noteId, { cookie: bench.cookie });

function someEdit(): Uint8Array {
	const doc = new Y.Doc();
	doc.getText('title').insert(0, 'A title with some length ');
	doc.getText('title').delete(2, 6);
	return Y.encodeStateAsUpdate(doc);
}

describe('a message that cannot be read closes its own connection only', () => {
	const edit = encodeEdit('edit-1', someEdit());
	const cases: [string, Uint8Array][] = [
		['nothing at all', new Uint8Array()],
		['an unknown type', Uint8Array.of(77, 1, 2, 3)],
		['a server message', Uint8Array.of(111, 2, 123, 125)],
		['an unknown sync step', Uint8Array.of(0, 9, 1, 0)],
		['an edit without an id', encodeEdit('', someEdit())],
		['an edit with an odd id', encodeEdit('a\0b', someEdit())],
		['an edit that is cut off', edit.slice(0, -9)],
		['an edit with bytes behind it', Uint8Array.of(...edit, 0)],
		['an edit with a length beyond the message', Uint8Array.of(100, 1, 97, 255, 255, 3, 0, 0)],
		['an edit that is no update', encodeEdit('edit-2', Uint8Array.of(1, 2, 3, 4, 5, 6))],
		['an edit whose update is cut off', encodeEdit('edit-3', someEdit().slice(0, -3))],
		['a state vector that is cut off', Uint8Array.of(0, 0, 2, 5, 1)],
		['presence that is no JSON', Uint8Array.of(1, 5, 1, 7, 1, 1, 123)],
	];

	test.each(cases)('%s', async (_, bytes) => {
		const noteId = await bench.makeNote();
		const peer = await openPage(bench.server, { noteId, cookie: bench.cookie });
		const before = await loadDocument(noteId);
		const socket = await enter(noteId).greeted();
		socket.send(bytes);
		expect(await socket.end()).toBe(closeCode.malformed);
		type(peer, peer.cells[0]!.id, 'R = 1 ohm\n');
		await saved(peer);
		expect(peer.connection).toBe('online');
		expect((await loadDocument(noteId)).seq).toBe(before.seq + 1);
		expect(await storedContent(noteId)).toEqual(contentOf(peer));
		peer.destroy();
	});

	test('a text frame', async () => {
		const socket = await enter(await bench.makeNote()).greeted();
		socket.socket.send('{}');
		expect(await socket.end()).toBe(closeCode.malformed);
	});

	test('a message over the limit', async () => {
		const socket = await enter(await bench.makeNote()).greeted();
		socket.send(new Uint8Array(maxMessageBytes + 1));
		expect(await socket.end()).toBe(closeCode.tooBig);
	});

	test.each([
		['a million clients', Uint8Array.of(1, 3, 192, 132, 61)],
		['more bytes than it may', Uint8Array.of(1, 0x88, 0x27, ...new Uint8Array(5000))],
	])('presence of %s', async (_, bytes) => {
		const socket = await enter(await bench.makeNote()).greeted();
		socket.send(bytes);
		expect(await socket.end()).toBe(closeCode.presenceTooBig);
	});

	test('far too many messages', async () => {
		const socket = await enter(await bench.makeNote()).greeted();
		for (let index = 0; index < 3000; index += 1) socket.send(Uint8Array.of(1, 1, 0));
		expect(await socket.end()).toBe(closeCode.tooMany);
	});
});

test('a handshake that is none of ours leaves the server running', async () => {
	for (const path of ['//', '/sync', '/sync/../..', '/%00', '/sync/%zz']) {
		const socket = new WebSocket(`ws://127.0.0.1:${bench.server.port}${path}`);
		await new Promise((resolve) => socket.once('error', resolve));
	}
	const page = await openPage(bench.server, {
		noteId: await bench.makeNote(),
		cookie: bench.cookie,
	});
	expect(page.connection).toBe('online');
	page.destroy();
});

/** What no page of ours would put into a note. */
function strangeContent(): Uint8Array {
	const doc = new Y.Doc();
	doc.getMap('strange').set('key', 'value');
	doc.getMap('cells').set('__proto__', new Y.Map([['kind', 'text']]));
	doc.getMap('cells').set('half', new Y.Map([['kind', 'calculation']]));
	return Y.encodeStateAsUpdate(doc);
}

test('unknown content is refused by name and reaches nobody, and neither does what the page does after it', async () => {
	const noteId = await bench.makeNote();
	const page = await openPage(bench.server, { noteId, cookie: bench.cookie });
	const socket = await enter(noteId).greeted();
	socket.send(encodeEdit('strange', strangeContent()));
	socket.send(encodeEdit('later', someEdit()));
	await eventually(() => socket.bodies<Refused>(messageType.refused).length === 2);
	const [strange, later] = socket.bodies<Refused>(messageType.refused);
	expect(strange!.id).toBe('strange');
	expect(strange!.reason).toContain('what no note has');
	expect(later).toMatchObject({ id: 'later', reason: strange!.reason });
	type(page, page.cells[0]!.id, 'R = 1 ohm\n');
	await saved(page);
	expect([...page.doc.share.keys()].sort()).toEqual(['cells', 'shown', 'title']);
	expect((await loadDocument(noteId)).seq).toBe(2);
	expect(await storedContent(noteId)).toEqual(contentOf(page));
	await socket.close();
	page.destroy();
});

test('unknown content that is stored already counts for nothing, and the page says so', async () => {
	const noteId = await bench.makeNote();
	const bytes = strangeContent();
	const clients = clientsIn(bytes);
	const personId = bench.engineer.personId;
	await append(noteId, [{ id: 'strange', personId, bytes, clients, cells: [] }]);
	const page = await openPage(bench.server, { noteId, cookie: bench.cookie });
	expect(page.notice).toContain('of no known kind');
	type(page, page.cells[0]!.id, 'R = 1 ohm\n');
	await saved(page);
	expect(contentOf(page).cells.map(({ source }) => source)).toEqual(['U = 5 V\nR = 1 ohm\n']);
	expect(page.addCell('text', page.cells[0]!.id, 'more')).toBeDefined();
	await saved(page);
	expect(await storedContent(noteId)).toEqual(contentOf(page));
	page.destroy();
});

test('a note that cannot be loaded opens for nobody and stays as it is stored', async () => {
	const noteId = await bench.makeNote('U = 5 V\nI = 1 A\n');
	const before = await storedContent(noteId);
	await bench.asOwner('alter table note_update rename to note_update_away');
	const sockets = Array.from({ length: 10 }, () => enter(noteId));
	const codes = await Promise.all(sockets.map((socket) => socket.end()));
	await bench.asOwner('alter table note_update_away rename to note_update');
	expect(new Set(codes)).toEqual(new Set([closeCode.unavailable]));
	expect(sockets.flatMap((socket) => socket.received)).toEqual([]);

	const page = await openPage(bench.server, { noteId, cookie: bench.cookie });
	expect(contentOf(page)).toEqual(before);
	expect(await storedContent(noteId)).toEqual(before);
	page.destroy();
});

test('a page opened while a note cannot be loaded gets it as soon as it can', async () => {
	const noteId = await bench.makeNote();
	const server = await startSyncServer();
	await bench.asOwner('alter table note_update rename to note_update_away');
	const early = new RawSocket(server, noteId, { cookie: bench.cookie });
	expect(await early.end()).toBe(closeCode.unavailable);
	await bench.asOwner('alter table note_update_away rename to note_update');
	const page = await openPage(server, { noteId, cookie: bench.cookie });
	expect(contentOf(page).cells).toHaveLength(1);
	page.destroy();
	await eventually(() => page.people.length === 0);
	await server.stop();
});
