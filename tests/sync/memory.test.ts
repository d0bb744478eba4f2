import { readFileSync } from 'node:fs';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { messageType } from '$lib/protocol/messages';
import * as notes from '$lib/server/notes/notes';
import { sixtyLines } from '../bench/sixty-lines';
import { eventually } from '../support/page';
import { RawSocket } from '../support/raw-socket';
import { startSyncBench, type SyncBench } from '../support/sync';

let bench: SyncBench;
beforeAll(async () => {
	bench = await startSyncBench();
	await bench.computes();
});
afterAll(() => bench.close());

/** Opens new notes of 60 lines and waits for their figures. */
async function open(count: number): Promise<void> {
	for (let index = 0; index < count; index += 1) {
		const { id } = await notes.create(bench.engineer, { title: 'Sixty lines', cells: sixtyLines });
		const socket = await new RawSocket(bench.server, id, { cookie: bench.cookie }).greeted();
		await eventually(() => socket.received.some(({ type }) => type === messageType.results));
	}
}

/** Memory of the server's process in bytes (Linux). */
function residentBytes(): number {
	const pages = readFileSync(`/proc/${bench.server.pid}/statm`, 'utf8').split(' ')[1];
	return Number(pages) * 4096;
}

test('an open note of 60 lines that nobody types in takes less than 1 MB', async () => {
	// The first ones bring code and buffers along.
	await open(24);
	const before = residentBytes();
	await open(36);
	const each = (residentBytes() - before) / 36;
	process.stdout.write(`${(each / 1e6).toFixed(2)} MB a note\n`);
	expect(each).toBeLessThan(1e6);
});
