import fc from 'fast-check';
import * as decoding from 'lib0/decoding';
import * as encoding from 'lib0/encoding';
import { afterAll, beforeAll, expect, test } from 'vitest';
import * as Y from 'yjs';
import { encodeEdit, messageType } from '$lib/protocol/messages';
import { loadDocument } from '$lib/server/notes/updates';
import { eventually, openPage, saved, type } from '../support/page';
import { makeMember, signIn } from '../support/people';
import { RawSocket } from '../support/raw-socket';
import { startSyncBench, type SyncBench } from '../support/sync';

let bench: SyncBench;
beforeAll(async () => {
	bench = await startSyncBench();
});
afterAll(() => bench.close());

const frames = process.env.HALFDIGIT_LONG ? 100_000 : 2500;

/** A number written in more bytes than it needs, which a decoder reads all the same. */
const longWay = (value: number) => Uint8Array.of(0x80 | (value & 0x7f), 0x80 | (value >> 7), 0);
const joined = (...parts: Uint8Array[]) => Uint8Array.from(parts.flatMap((part) => [...part]));

function framed(type: number, ...bodies: Uint8Array[]): Uint8Array {
	const encoder = encoding.createEncoder();
	encoding.writeVarUint(encoder, type);
	for (const body of bodies) encoding.writeUint8Array(encoder, body);
	return encoding.toUint8Array(encoder);
}

function prefixed(bytes: Uint8Array): Uint8Array {
	const encoder = encoding.createEncoder();
	encoding.writeVarUint8Array(encoder, bytes);
	return encoding.toUint8Array(encoder);
}

/** What a message of the server says of clients. */
function presenceIn(decoder: decoding.Decoder): { clientId: number; state: unknown }[] {
	const inner = decoding.createDecoder(decoding.readVarUint8Array(decoder));
	return Array.from({ length: decoding.readVarUint(inner) }, () => {
		const clientId = decoding.readVarUint(inner);
		decoding.readVarUint(inner);
		return { clientId, state: JSON.parse(decoding.readVarString(inner)) as unknown };
	});
}

/** Presence of a client at a place. */
function presenceOf(clientId: number, clock: number, state: unknown): Uint8Array {
	const encoder = encoding.createEncoder();
	encoding.writeVarUint(encoder, 1);
	encoding.writeVarUint(encoder, clientId);
	encoding.writeVarUint(encoder, clock);
	encoding.writeVarString(encoder, JSON.stringify(state));
	return framed(messageType.awareness, prefixed(encoding.toUint8Array(encoder)));
}

/** Frames that would change the note if anybody let them. */
function framesFor(doc: Y.Doc, others: readonly number[]): fc.Arbitrary<Uint8Array> {
	const mine = new Y.Doc();
	Y.applyUpdate(mine, Y.encodeStateAsUpdate(doc));
	mine.getText('title').insert(0, 'Mine ');
	mine.getMap('cells').clear();
	const update = Y.encodeStateAsUpdate(mine);
	const body = fc.constantFrom(update, Y.encodeStateAsUpdate(mine, Y.encodeStateVector(doc)));
	const step = fc.constantFrom(0, 1, 2, 3, 127);
	const sync = fc
		.tuple(step, body)
		.map(([kind, bytes]) => framed(messageType.sync, Uint8Array.of(kind), prefixed(bytes)));
	const odd = fc
		.tuple(step, body)
		.map(([kind, bytes]) => joined(longWay(0), longWay(kind), prefixed(bytes)));
	const edit = fc
		.tuple(fc.stringMatching(/^\w{1,20}$/), body)
		.map(([id, bytes]) => encodeEdit(id, bytes));
	const presence = fc
		.tuple(fc.constantFrom(...others), fc.nat(1000), fc.constantFrom(null, { cellId: 'x' }))
		.map(([id, clock, state]) => presenceOf(id, clock, state));
	const noise = fc.uint8Array({ minLength: 1, maxLength: 60 });
	const proper = fc.oneof(sync, odd, edit, presence, fc.constant(Uint8Array.of(0, 1, 2, 0, 0)));
	const spoilt = fc
		.tuple(proper, fc.nat(60), fc.integer({ min: 0, max: 255 }))
		.map(([bytes, at, byte]) =>
			bytes.map((old, index) => (index === at % bytes.length ? byte : old)),
		);
	return fc.oneof(
		proper,
		spoilt,
		noise,
		fc.tuple(proper, proper).map((both) => joined(...both)),
		fc.tuple(proper, noise).map((both) => joined(...both)),
	);
}

test(`of ${frames} frames by one who may only read, none is stored and none reaches others`, async () => {
	const noteId = await bench.makeNote();
	const peer = await openPage(bench.server, { noteId, cookie: bench.cookie });
	const watcher = await new RawSocket(bench.server, noteId, { cookie: bench.cookie }).greeted();
	const before = await loadDocument(noteId);
	const stored = Y.encodeStateAsUpdate(before.doc);
	const cookie = await signIn(await makeMember(bench.engineer, 'administrator'));
	const seed = Number(process.env.HALFDIGIT_SEED ?? 20_261_201);
	const sample = fc.sample(framesFor(before.doc, [peer.doc.clientID]), { numRuns: frames, seed });
	const readOnly = () => new RawSocket(bench.server, noteId, { cookie }).greeted();

	await eventually(() => watcher.received.some(({ type }) => type === messageType.results));
	const heard = watcher.received.length;
	let socket = await readOnly();
	for (const [index, frame] of sample.entries()) {
		// What cannot be read, or comes too fast, ends the socket; another one takes over.
		if (socket.socket.readyState !== socket.socket.OPEN) socket = await readOnly();
		socket.send(frame);
		if (index % 5 === 4) await new Promise((resolve) => setImmediate(resolve));
	}
	await socket.close();

	expect(await loadDocument(noteId)).toMatchObject({ seq: before.seq, pending: false });
	expect(Y.encodeStateAsUpdate((await loadDocument(noteId)).doc)).toEqual(stored);
	const news = watcher.received.slice(heard).filter(({ type, decoder }) => {
		// Presence without anybody keeps a connection alive.
		return !(type === messageType.awareness && decoder.arr.length === 3);
	});
	expect(news.filter(({ type }) => type !== messageType.awareness)).toEqual([]);
	const said = news.flatMap(({ decoder }) => presenceIn(decoding.clone(decoder)));
	// The peer is where it was, whatever was said under its id.
	for (const { clientId, state } of said.filter(({ clientId }) => clientId === peer.doc.clientID)) {
		expect({ clientId, state }).toMatchObject({ state: { user: { id: bench.engineer.personId } } });
	}
	expect(peer.title).toBe('Divider');

	// And the note is as alive as before.
	type(peer, peer.cells[0]!.id, 'R = 1 ohm\n');
	await saved(peer);
	expect((await loadDocument(noteId)).seq).toBe(before.seq + 1);
	await watcher.close();
	peer.destroy();
}, 600_000);

test('an empty answer of a reader is taken without a word', async () => {
	const noteId = await bench.makeNote();
	const cookie = await signIn(await makeMember(bench.engineer, 'administrator'));
	const socket = await new RawSocket(bench.server, noteId, { cookie }).greeted();
	for (let time = 0; time < 20; time += 1) socket.send(Uint8Array.of(0, 1, 2, 0, 0));
	// The answer to a question that comes behind them.
	socket.send(Uint8Array.of(0, 0, 1, 0));
	await eventually(() => socket.received.some(({ type }) => type === messageType.sync));
	expect(socket.received.filter(({ type }) => type === messageType.refused)).toEqual([]);
	expect(socket.ended).toBeUndefined();
	await socket.close();
});
