import { afterAll, beforeAll, expect, test } from 'vitest';
import * as Y from 'yjs';
import { closeCode, closeSentence } from '$lib/protocol/closing';
import { encodeEdit, messageType, type Saved } from '$lib/protocol/messages';
import { encodeMore, decodePart, maxPartBytes, PartsInbox } from '$lib/protocol/parts';
import { append } from '$lib/server/notes/append';
import { heads, loadDocument } from '$lib/server/notes/updates';
import * as decoding from 'lib0/decoding';
import { eventually, openPage, saved } from '../support/page';
import { makeMember, signIn } from '../support/people';
import { startProxy } from '../support/proxy';
import { RawSocket } from '../support/raw-socket';
import { startSyncServer, syncUrl } from '../support/server';
import { startSyncBench, type SyncBench } from '../support/sync';

let bench: SyncBench;
beforeAll(async () => {
	bench = await startSyncBench();
});
afterAll(() => bench.close());

const isLong = Boolean(process.env.HALFDIGIT_LONG);
const enter = (noteId: string, cookie = bench.cookie) =>
	new RawSocket(bench.server, noteId, { cookie });
const megabyte = 1024 * 1024;

/** Makes a note's document larger by about so many bytes, by what counts for nothing. */
async function swell(noteId: string, bytes: number): Promise<void> {
	const doc = new Y.Doc();
	const bulk = doc.getText('bulk');
	for (let at = 0; at < bytes; at += megabyte) {
		const before = Y.encodeStateVector(doc);
		bulk.insert(0, 'x'.repeat(Math.min(megabyte, bytes - at)));
		const edit = { bytes: Y.encodeStateAsUpdate(doc, before), clients: [doc.clientID], cells: [] };
		await append(noteId, [{ id: `bulk-${at}`, personId: bench.engineer.personId, ...edit }]);
	}
}

test('one person may have 64 notes open, and the next page is told why it may not', async () => {
	const noteId = await bench.makeNote();
	const cookie = await signIn(await makeMember(bench.engineer, 'engineer'));
	const sockets = Array.from({ length: 70 }, () => enter(noteId, cookie));
	await eventually(
		() => sockets.filter(({ ended }) => ended === closeCode.tooManyPages).length === 6,
	);
	expect(sockets.filter(({ ended }) => ended === undefined)).toHaveLength(64);
	await sockets.find(({ ended }) => ended === undefined)!.close();
	await enter(noteId, cookie).greeted();
	await Promise.all(sockets.map((socket) => socket.close()));
});

test('300 pages may have one note open', async () => {
	const noteId = await bench.makeNote();
	const cookies = await Promise.all(
		Array.from({ length: 5 }, async () => signIn(await makeMember(bench.engineer, 'engineer'))),
	);
	const sockets = cookies.flatMap((cookie) =>
		Array.from({ length: 60 }, () => enter(noteId, cookie)),
	);
	await Promise.all(sockets.map((socket) => socket.greeted()));
	expect(await enter(noteId).end()).toBe(closeCode.noteCrowded);
	await Promise.all(sockets.map((socket) => socket.close()));
});

// What is judged, and that it is judged so, is tested at once beside `Proof`.
if (isLong)
	test('a document can grow to 24 MB, and the edit that would make it larger is not stored', async () => {
		const noteId = await bench.makeNote();
		await swell(noteId, 24 * megabyte - 300_000);
		const socket = await enter(noteId).greeted();
		const insert = (length: number) => {
			const doc = new Y.Doc();
			doc.getText('title').insert(0, 'x'.repeat(length));
			return Y.encodeStateAsUpdate(doc);
		};
		await socket.save('fits', insert(200_000));
		const { seq } = await loadDocument(noteId);
		socket.send(encodeEdit('too-large', insert(200_000)));
		expect(await socket.end()).toBe(closeCode.tooLarge);
		expect((await loadDocument(noteId)).seq).toBe(seq);
	});

test('edits that wait for others are held back up to 2 MB', async () => {
	const noteId = await bench.makeNote();
	const socket = await enter(noteId).greeted();
	const doc = new Y.Doc();
	const title = doc.getText('title');
	title.insert(0, 'never sent');
	const waiting = () => {
		const before = Y.encodeStateVector(doc);
		title.insert(0, 'x'.repeat(700_000));
		return Y.encodeStateAsUpdate(doc, before);
	};
	await socket.save('one', waiting());
	await socket.save('two', waiting());
	socket.send(encodeEdit('three', waiting()));
	expect(await socket.end()).toBe(closeCode.tooMuchPending);
});

test('a page that does not read what it is sent is closed, and the others go on', async () => {
	const noteId = await bench.makeNote();
	const slow = await enter(noteId).greeted();
	slow.socket.pause();
	const cookies = [bench.cookie, bench.cookie, bench.cookie];
	const writers = await Promise.all(cookies.map((cookie) => enter(noteId, cookie).greeted()));
	const text = 'x'.repeat(600_000);
	await Promise.all(
		writers.map(async (writer, who) => {
			for (let round = 0; round < 9; round += 1) {
				const doc = new Y.Doc();
				doc.getText('title').insert(0, text);
				await writer.save(`w${who}r${round}`, Y.encodeStateAsUpdate(doc));
			}
		}),
	);
	slow.socket.resume();
	expect(await slow.end()).toBe(closeCode.tooSlow);
	for (const writer of writers) expect(writer.socket.readyState).toBe(writer.socket.OPEN);
	await Promise.all(writers.map((writer) => writer.close()));
});

test('a process takes only so many edits while the database is away, and all that were saved are there', async () => {
	const noteId = await bench.makeNote();
	const address = new URL(bench.databaseUrl);
	const proxy = await startProxy(Number(address.port));
	address.port = String(proxy.port);
	const server = await startSyncServer({ DATABASE_URL: address.href });
	const sockets = await Promise.all(
		Array.from({ length: 6 }, () =>
			new RawSocket(server, noteId, { cookie: bench.cookie }).greeted(),
		),
	);
	proxy.cut();
	for (const [who, socket] of sockets.entries()) {
		const doc = new Y.Doc();
		doc.on('update', (update: Uint8Array) =>
			socket.send(encodeEdit(`w${who}-${doc.getText('title').length}`, update)),
		);
		for (let edit = 0; edit < 950; edit += 1) doc.getText('title').insert(0, 'x');
	}
	await eventually(() => sockets.some(({ ended }) => ended === closeCode.unavailable));
	expect(sockets.flatMap((socket) => socket.bodies<Saved>(messageType.saved))).toEqual([]);
	proxy.mend();
	const seq = async () => (await heads([noteId])).get(noteId)!.seq;
	await eventually(async () => (await seq()) >= 5001);
	expect(await seq()).toBe(5001);
	await Promise.all(sockets.map((socket) => socket.close()));
	expect(await server.stop()).toBe(0);
	await proxy.close();
});

const large = isLong
	? { bytes: 20 * megabyte, bytesPerSecond: 125_000, limitMs: 300_000 }
	: { bytes: 2 * megabyte, bytesPerSecond: megabyte, limitMs: 20_000 };

test(
	`a document of ${large.bytes / megabyte} MB comes over a slow line in parts, without a new connection`,
	async () => {
		const noteId = await bench.makeNote();
		await swell(noteId, large.bytes);
		const proxy = await startProxy(bench.server.port);
		proxy.bytesPerSecond = large.bytesPerSecond;
		const raw = await enter(noteId).greeted();
		raw.send(Uint8Array.of(0, 0, 1, 0));
		const inbox = new PartsInbox();
		let index = 0;
		await eventually(() => {
			const parts = raw.received.filter(({ type }) => type === messageType.part);
			const message = parts[index];
			if (!message) return false;
			const part = decodePart(decoding.clone(message.decoder));
			expect(part.bytes.length).toBeLessThanOrEqual(maxPartBytes);
			// No more than two come before the first is said to be there.
			expect(parts.length).toBeLessThanOrEqual(index + 2);
			raw.send(encodeMore(part));
			index += 1;
			return inbox.take(part);
		});
		await raw.close();

		const page = openPage({ url: syncUrl(proxy.port) }, { noteId, cookie: bench.cookie });
		const opened = await page;
		expect(proxy.connections).toBe(1);
		expect(opened.doc.getText('bulk').length).toBe(large.bytes);
		opened.setTitle('Read to the end');
		await saved(opened);
		opened.destroy();
		await proxy.close();
	},
	large.limitMs,
);

const quietMs = isLong ? 180_000 : 12_000;

test(
	`a page alone that reads only hears something at least every 10 s, for ${quietMs / 1000} s`,
	async () => {
		const noteId = await bench.makeNote();
		const cookie = await signIn(await makeMember(bench.engineer, 'administrator'));
		const proxy = await startProxy(bench.server.port);
		const socket = await new RawSocket({ url: syncUrl(proxy.port) }, noteId, { cookie }).greeted();
		let last = performance.now();
		let longest = 0;
		socket.socket.on('message', () => {
			longest = Math.max(longest, performance.now() - last);
			last = performance.now();
		});
		const end = performance.now() + quietMs;
		await eventually(() => performance.now() > end, quietMs + 20_000);
		expect(Math.max(longest, performance.now() - last)).toBeLessThan(10_000);
		expect(longest).toBeGreaterThan(0);
		expect(socket.ended).toBeUndefined();
		expect(proxy.connections).toBe(1);
		await socket.close();
		await proxy.close();
	},
	quietMs + 30_000,
);

test('each limit has a sentence of its own', () => {
	const { tooLarge, tooMuchPending, tooMany, tooManyPages, presenceTooBig, noteCrowded, tooSlow } =
		closeCode;
	const codes = [
		tooLarge,
		tooMuchPending,
		tooMany,
		tooManyPages,
		presenceTooBig,
		noteCrowded,
		tooSlow,
	];
	expect(new Set(codes.map((code) => closeSentence(code))).size).toBe(codes.length);
});
