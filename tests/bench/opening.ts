import { readFileSync } from 'node:fs';
import { setTimeout as wait } from 'node:timers/promises';
import * as decoding from 'lib0/decoding';
import { WebSocket } from 'ws';
import { eq } from 'drizzle-orm';
import { placedCells } from '$lib/note/document';
import { messageType } from '$lib/protocol/messages';
import { db } from '$lib/server/db/client';
import { noteSnapshot } from '$lib/server/db/schema/notes';
import { appendAll } from '$lib/server/notes/append';
import { loadDocument } from '$lib/server/notes/updates';
import { startSyncServer, type SyncServer } from '../support/server';
import type { Seat } from './crowd';
import { quantile, row, type Row } from './row';

const longLog = 100_000;
const openings = 15;
/** A process has begun its evaluators by then, which take both processors while they begin. */
const settlesMs = 2500;

/** Opening a note whose log is long, each time by a process that does not have it open. */
export async function openingRow(seat: Seat, personId: string): Promise<Row> {
	const noteId = seat.url.split('/').at(-1) ?? '';
	await type(noteId, personId, longLog);
	// The first page that opens it has it brought into shape; that is not what is measured.
	await figureOf(seat);
	while ((await newestSnapshot(noteId)) < longLog) await wait(50);
	const sample: number[] = [];
	for (let opening = 0; opening < openings; opening++) {
		const server = await startSyncServer();
		await wait(settlesMs);
		sample.push(await figureOf({ ...seat, url: `${server.url}/${noteId}` }));
		await server.stop();
	}
	return row({
		id: 'sync.open-100000-updates',
		what: `from connecting to the first figure, median of ${openings}, a note with ${longLog} stored updates`,
		value: quantile(sample, 0.5),
		unit: 'ms',
		target: 300,
	});
}

/** Writes letters into the note's last cell, each as an update of its own. */
async function type(noteId: string, personId: string, count: number): Promise<void> {
	const { doc } = await loadDocument(noteId);
	const text = placedCells(doc).at(-1)?.text;
	let bytes: Uint8Array[] = [];
	doc.on('update', (update: Uint8Array) => bytes.push(update));
	for (let done = 0; done < count; done += 1000) {
		bytes = [];
		for (let key = 0; key < 1000; key++) text?.insert(text.length, key % 60 === 0 ? '\n# ' : 'x');
		// A note has an end: half of what was written goes again.
		text?.delete(text.length - 500, 500);
		const edits = bytes.map((update, index) => ({
			id: `${done}-${index}`,
			personId,
			bytes: update,
			clients: [doc.clientID],
			cells: [],
		}));
		await appendAll([{ noteId, edits }], { waiting: true });
	}
}

async function newestSnapshot(noteId: string): Promise<number> {
	const rows = await db()
		.select({ seq: noteSnapshot.seq })
		.from(noteSnapshot)
		.where(eq(noteSnapshot.noteId, noteId));
	return Math.max(0, ...rows.map(({ seq }) => seq));
}

/** Time in ms from connecting to the first figures. */
async function figureOf({ url, headers }: Seat): Promise<number> {
	const from = performance.now();
	const socket = new WebSocket(url, { headers });
	const took = await new Promise<number>((resolve, reject) => {
		socket.on('message', (data: Buffer) => {
			if (decoding.readVarUint(decoding.createDecoder(data)) !== messageType.results) return;
			resolve(performance.now() - from);
		});
		socket.once('close', (code) => reject(new Error(`closed with ${code}`)));
		socket.once('error', reject);
	});
	socket.removeAllListeners('close');
	socket.terminate();
	return took;
}

/** What a process holds for each note that somebody has open and nobody writes in. */
export async function memoryRow(server: SyncServer, notes: readonly Seat[][]): Promise<Row> {
	const before = resident(server.pid);
	const sockets: WebSocket[] = [];
	for (const [seat] of notes) {
		if (!seat) continue;
		const socket = new WebSocket(seat.url, { headers: seat.headers });
		await new Promise((resolve, reject) => {
			socket.once('message', resolve);
			socket.once('error', reject);
		});
		sockets.push(socket);
	}
	await wait(3000);
	const after = resident(server.pid);
	for (const socket of sockets) socket.terminate();
	return row({
		id: 'sync.memory-idle-note',
		what: `resident memory for each idle open note of 60 lines, ${notes.length} notes with a page each`,
		value: (after - before) / notes.length,
		unit: 'MB',
		target: 1,
	});
}

/** Resident memory of a process in MB. */
export function resident(pid: number): number {
	const [, pages = '0'] = readFileSync(`/proc/${pid}/statm`, 'utf8').split(' ');
	return (Number(pages) * 4096) / 1e6;
}
