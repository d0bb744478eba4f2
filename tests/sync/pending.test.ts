import { afterAll, beforeAll, expect, test } from 'vitest';
import * as Y from 'yjs';
import { messageType } from '$lib/protocol/messages';
import * as store from '$lib/server/evaluation/store';
import { loadDocument } from '$lib/server/notes/updates';
import { contentOf, eventually, openPage, saved, storedContent, type } from '../support/page';
import { outOfOrder } from '../support/out-of-order';
import { makeMember, signIn } from '../support/people';
import { RawSocket } from '../support/raw-socket';
import { startSyncServer } from '../support/server';
import { startSyncBench, type SyncBench } from '../support/sync';

let bench: SyncBench;
beforeAll(async () => {
	bench = await startSyncBench();
	await bench.computes();
});
afterAll(() => bench.close());

/** Two edits of one author, the second of which needs the first. */
async function twoEdits(noteId: string) {
	const { doc } = await loadDocument(noteId);
	const updates: Uint8Array[] = [];
	doc.on('update', (update: Uint8Array) => updates.push(update));
	doc.getText('title').insert(0, 'First ');
	doc.getText('title').insert(6, 'second ');
	return { first: updates[0]!, second: updates[1]!, title: doc.getText('title').toJSON() };
}

const questions = (socket: RawSocket) =>
	socket.received.filter(({ type, decoder }) => type === messageType.sync && decoder.arr[1] === 0);

test('an edit that comes before the one it needs is stored, asked about, and whole once that one is there', async () => {
	const noteId = await bench.makeNote();
	const { first, second, title } = await twoEdits(noteId);
	const doomed = await startSyncServer();
	const socket = await new RawSocket(doomed, noteId, { cookie: bench.cookie }).greeted();
	await socket.save('second', second);
	expect(questions(socket)).toHaveLength(1);
	expect(await loadDocument(noteId)).toMatchObject({ seq: 2, pending: true });
	expect((await storedContent(noteId)).title).toBe('Divider');

	// The process ends between the two.
	await doomed.stop('SIGKILL');
	const peer = await openPage(bench.server, { noteId, cookie: bench.cookie });
	const late = await new RawSocket(bench.server, noteId, { cookie: bench.cookie }).greeted();
	await late.save('first', first);
	await eventually(() => peer.title === title);
	expect((await storedContent(noteId)).title).toBe(title);
	expect((await loadDocument(noteId)).pending).toBe(false);
	await late.close();
	peer.destroy();
});

test('no results are stored for a note with a pending edit', async () => {
	const noteId = await bench.makeNote();
	const { second } = await twoEdits(noteId);
	const page = await openPage(bench.server, { noteId, cookie: bench.cookie });
	await eventually(async () => (await store.find(noteId))?.seq === 1);
	const socket = await new RawSocket(bench.server, noteId, { cookie: bench.cookie }).greeted();
	await socket.save('second', second);
	page.setTitle('Another title');
	await saved(page);
	await eventually(() => page.saving.state === 'saved');
	expect((await store.find(noteId))?.seq).toBe(1);
	await socket.close();
	page.destroy();
});

test('a page that is asked for what an edit needs gives it, and both pages get everything', async () => {
	const noteId = await bench.makeNote();
	const author = await openPage(bench.server, { noteId, cookie: bench.cookie });
	const peer = await openPage(bench.server, { noteId, cookie: bench.cookie });
	// What the server would have lost with a process: the page has it, the outbox does not.
	const lost: Uint8Array[] = [];
	const elsewhere = new Y.Doc();
	Y.applyUpdate(elsewhere, Y.encodeStateAsUpdate(author.doc));
	elsewhere.on('update', (update: Uint8Array) => lost.push(update));
	elsewhere.getText('title').insert(0, 'Lost ');
	elsewhere.getText('title').insert(5, 'and found ');
	const socket = await new RawSocket(bench.server, noteId, { cookie: bench.cookie }).greeted();
	await socket.save('needs-the-lost-one', lost[1]!);
	expect(peer.title).toBe('Divider');
	Y.applyUpdate(author.doc, lost[0]!);
	await saved(author);
	await eventually(() => peer.title === 'Lost and found Divider');
	await eventually(() => author.title === 'Lost and found Divider');
	expect(contentOf(author)).toEqual(await storedContent(noteId));
	await socket.close();
	author.destroy();
	peer.destroy();
});

test('what was written offline is taken although somebody else’s edit waits for what it needs', async () => {
	const noteId = await bench.makeNote();
	const { first, second, title } = await twoEdits(noteId);
	const other = await makeMember(bench.engineer, 'engineer');
	const doomed = await startSyncServer();
	const page = await openPage(doomed, { noteId, cookie: await signIn(other) });
	await doomed.stop('SIGKILL');
	await eventually(() => page.connection === 'offline');
	type(page, page.cells[0]!.id, 'offline = 1\n');
	const socket = await new RawSocket(bench.server, noteId, { cookie: bench.cookie }).greeted();
	await socket.save('second', second);

	const back = await startSyncServer({ PORT: String(doomed.port) });
	await saved(page);
	expect(page.notice).toBeUndefined();
	expect((await storedContent(noteId)).cells[0]!.source).toContain('offline = 1');
	await socket.save('first', first);
	await eventually(() => page.title === title);
	expect(contentOf(page)).toEqual(await storedContent(noteId));
	await socket.close();
	page.destroy();
	await back.stop();
});

test('edits that come out of their authors’ order are whole for those who have the note open', async () => {
	const noteId = await bench.makeNote();
	const page = await openPage(bench.server, { noteId, cookie: bench.cookie });
	const { doc } = await loadDocument(noteId);
	const { updates, whole } = outOfOrder(Y.encodeStateAsUpdate(doc), 'title');
	const socket = await new RawSocket(bench.server, noteId, { cookie: bench.cookie }).greeted();
	for (const [at, update] of updates.entries()) await socket.save(`edit-${at}`, update);
	await eventually(() => page.title === whole('Divider'));
	expect(contentOf(page)).toEqual(await storedContent(noteId));
	expect((await loadDocument(noteId)).pending).toBe(false);
	await eventually(async () => (await store.find(noteId))?.content.title === whole('Divider'));
	await socket.close();
	page.destroy();
});
