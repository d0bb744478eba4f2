import { afterAll, beforeAll, expect, test } from 'vitest';
import * as Y from 'yjs';
import { encodeEdit, messageType, type Refused, type Saved } from '$lib/protocol/messages';
import { loadDocument } from '$lib/server/notes/updates';
import { contentOf, eventually, openPage, storedContent } from '../support/page';
import { makeMember, signIn } from '../support/people';
import { RawSocket } from '../support/raw-socket';
import { startSyncServer, type SyncServer } from '../support/server';
import { startSyncBench, type SyncBench } from '../support/sync';

let bench: SyncBench;
let second: SyncServer;
let otherCookie: string;
beforeAll(async () => {
	bench = await startSyncBench();
	second = await startSyncServer();
	otherCookie = await signIn(await makeMember(bench.engineer, 'engineer'));
});
afterAll(async () => {
	await second.stop();
	await bench.close();
});

/** A copy of the stored note that writes under a client id, and the update of what it inserts in the title. */
async function insertAs(clientID: number, noteId: string, text: string): Promise<Uint8Array> {
	const { doc } = await loadDocument(noteId);
	doc.clientID = clientID;
	const before = Y.encodeStateVector(doc);
	doc.getText('title').insert(0, text);
	return Y.encodeStateAsUpdate(doc, before);
}

const enter = (server: SyncServer, noteId: string, cookie: string) =>
	new RawSocket(server, noteId, { cookie }).greeted();
const refusals = (socket: RawSocket) => socket.bodies<Refused>(messageType.refused);

test('of two edits that say different things at one place of one client, the second is refused, and all agree', async () => {
	const noteId = await bench.makeNote();
	const peer = await openPage(bench.server, { noteId, cookie: bench.cookie });
	const [first, other] = await Promise.all([
		insertAs(4711, noteId, 'First '),
		insertAs(4711, noteId, 'Other '),
	]);
	const [one, two] = await Promise.all([
		enter(bench.server, noteId, bench.cookie),
		enter(bench.server, noteId, bench.cookie),
	]);
	await one.save('first', first);
	two.send(encodeEdit('other', other));
	await eventually(() => refusals(two).length === 1);
	expect(refusals(two)[0]).toMatchObject({ id: 'other' });
	expect(refusals(two)[0]!.reason).toContain('something else than what this page wrote before');
	await eventually(() => peer.title === 'First Divider');
	expect(await storedContent(noteId)).toEqual(contentOf(peer));
	// To say the same once more is no harm.
	await one.save('again', first);
	await Promise.all([one.close(), two.close()]);
	peer.destroy();
});

test.each(['the same process', 'another process'])(
	'an edit under the client id of somebody on %s is refused by name',
	async (where) => {
		const noteId = await bench.makeNote();
		const one = await enter(bench.server, noteId, bench.cookie);
		const server = where === 'another process' ? second : bench.server;
		const two = await enter(server, noteId, otherCookie);
		const watcher = await openPage(server, { noteId, cookie: otherCookie });
		await one.save('theirs', await insertAs(4712, noteId, 'Theirs '));
		await eventually(() => watcher.title === 'Theirs Divider');
		const foreign = await insertAs(4712, noteId, 'Foreign ');
		two.send(encodeEdit('foreign', foreign));
		await eventually(() => refusals(two).length === 1);
		expect(refusals(two)[0]!.reason).toContain('under the name of somebody else’s page');
		expect((await storedContent(noteId)).title).toBe('Theirs Divider');
		await Promise.all([one.close(), two.close()]);
		watcher.destroy();
	},
);

test('where two people write under one client id on two processes at once, the database takes one of them', async () => {
	const noteId = await bench.makeNote();
	const updates = await Promise.all([insertAs(99, noteId, 'A '), insertAs(99, noteId, 'B ')]);
	const sockets = [
		await enter(bench.server, noteId, bench.cookie),
		await enter(second, noteId, otherCookie),
	];
	for (const [index, socket] of sockets.entries())
		socket.send(encodeEdit(`e${index}`, updates[index]!));
	const isTold = (socket: RawSocket) =>
		refusals(socket).length + socket.bodies<Saved>(messageType.saved).length > 0;
	await eventually(() => sockets.every(isTold));
	expect(sockets.flatMap(refusals)).toHaveLength(1);
	const { title } = await storedContent(noteId);
	expect(['A Divider', 'B Divider']).toContain(title);
	const pages = await Promise.all([
		openPage(bench.server, { noteId, cookie: bench.cookie }),
		openPage(second, { noteId, cookie: otherCookie }),
	]);
	for (const page of pages) {
		expect(page.title).toBe(title);
		page.destroy();
	}
	await Promise.all(sockets.map((socket) => socket.close()));
});
