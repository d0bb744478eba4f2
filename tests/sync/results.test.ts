import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, expect, test } from 'vitest';
import * as Y from 'yjs';
import { db } from '$lib/server/db/client';
import { evaluation, note } from '$lib/server/db/schema/notes';
import * as store from '$lib/server/evaluation/store';
import { closePool } from '$lib/server/evaluation/pool';
import * as updates from '$lib/server/notes/updates';
import { contentOf, eventually, openPage, saved, storedContent, type } from '../support/page';
import { startSyncBench, type SyncBench } from '../support/sync';

let bench: SyncBench;
beforeAll(async () => {
	bench = await startSyncBench();
	await bench.computes();
});
afterAll(async () => {
	await closePool();
	await bench.close();
});

const open = (noteId: string) => openPage(bench.server, { noteId, cookie: bench.cookie });

test('a change in one page brings new figures to both, and they are stored with what they belong to', async () => {
	const noteId = await bench.makeNote('U = 5 V\nR = 2 kohm\nI = U / R\n');
	const [page, peer] = await Promise.all([open(noteId), open(noteId)]);
	await eventually(() => peer.evaluation.quantities.I?.value === 0.0025);
	const source = page.textOf(page.cells[0]!.id)!;
	page.doc.transact(() => {
		source.delete(4, 1);
		source.insert(4, '8');
	});
	for (const each of [page, peer]) {
		await eventually(() => each.evaluation.quantities.I?.value === 0.004);
	}
	await saved(page);
	await eventually(async () => (await store.find(noteId))?.seq === 2);
	const stored = await store.find(noteId);
	expect(stored?.content).toEqual(await storedContent(noteId));
	expect(stored?.results).toEqual(peer.evaluation);
	page.destroy();
	peer.destroy();
});

test('a wrong line takes no other line down', async () => {
	const noteId = await bench.makeNote('U = 5 V\nI = U / nothing\nP = U * 2 A\n');
	const page = await open(noteId);
	await eventually(() => page.evaluation.quantities.P?.value === 10);
	expect(page.evaluation.errors).toMatchObject([{ line: 2, code: 'unknownName' }]);
	page.destroy();
});

test('a new title reaches the list of notes', async () => {
	const noteId = await bench.makeNote();
	const page = await open(noteId);
	page.setTitle('Battery channel');
	await saved(page);
	await eventually(async () => {
		const [row] = await db().select({ title: note.title }).from(note).where(eq(note.id, noteId));
		return row?.title === 'Battery channel';
	});
	page.destroy();
});

test('results are computed anew where the stored ones are older than the log, and never replace newer ones', async () => {
	const noteId = await bench.makeNote('U = 5 V\n');
	const first = await store.current(noteId);
	expect(first).toMatchObject({ seq: 1, pending: false });
	expect(first.results.quantities.U).toMatchObject({ value: 5, unit: 'V' });
	const page = await open(noteId);
	type(page, page.cells[0]!.id, 'R = 1 ohm\n');
	await saved(page);
	const second = await store.current(noteId);
	expect(second.seq).toBe(2);
	// The database keeps no order of names.
	expect(Object.keys(second.results.quantities).sort()).toEqual(['R', 'U']);
	await store.save(noteId, first);
	expect((await store.find(noteId))?.seq).toBe(2);
	page.destroy();
});

test('recalculations, cursors and presence add nothing to the document or the log', async () => {
	const noteId = await bench.makeNote('U = 5 V\n');
	const [page, peer] = await Promise.all([open(noteId), open(noteId)]);
	const cellId = page.cells[0]!.id;
	const digits = 60;
	let typedBytes = 0;
	page.doc.on('update', (update: Uint8Array) => (typedBytes += update.length));
	type(page, cellId, 'a = 0.');
	const before = Y.encodeStateAsUpdate(peer.doc).length;
	for (let digit = 1; digit <= digits; digit += 1) {
		type(page, cellId, '1');
		page.setPlace(digit % 2 ? cellId : null);
		// Every second one waits for its figures, the others overtake the evaluation before them.
		const value = Number(`0.${'1'.repeat(digit)}`);
		if (digit % 2) await eventually(() => peer.evaluation.quantities.a?.value === value);
	}
	await saved(page);
	expect([...peer.doc.share.keys()].sort()).toEqual(['cells', 'shown', 'title']);
	// Edits make rows, one each or several in one; nothing else does.
	expect((await store.current(noteId)).seq).toBeLessThanOrEqual(2 + digits);
	expect(contentOf(peer)).toEqual(contentOf(page));
	// Text typed in one go takes a byte a letter, and a few for the client that typed it.
	expect(Y.encodeStateAsUpdate(peer.doc).length - before).toBeLessThanOrEqual(digits + 40);
	expect(typedBytes).toBeLessThan(digits * 40);
	page.destroy();
	peer.destroy();
});

const recalculations = process.env.HALFDIGIT_LONG ? 10_000 : 200;

test(`${recalculations} recalculations without an edit leave document and log byte for byte as they were`, async () => {
	const noteId = await bench.makeNote('U = 5 V\nI = U / 2 kohm\n');
	const page = await open(noteId);
	const standing = async () => {
		const rows = await updates.rowsSince(noteId, 0);
		return {
			log: rows.map(({ seq, bytes }) => `${seq} ${Buffer.from(bytes).toString('base64')}`),
			state: Buffer.from(Y.encodeStateAsUpdate(page.doc)).toString('base64'),
		};
	};
	const before = await standing();
	for (let time = 0; time < recalculations; time += 1) {
		// Without stored results the note is computed anew for whoever asks.
		await db().delete(evaluation).where(eq(evaluation.noteId, noteId));
		const { results } = await store.current(noteId);
		expect(results.quantities.I?.value).toBe(0.0025);
	}
	expect(await standing()).toEqual(before);
	page.destroy();
}, 600_000);
