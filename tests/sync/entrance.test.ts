import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import * as Y from 'yjs';
import { closeCode } from '$lib/protocol/closing';
import { encodeEdit, messageType, type Hello, type Refused } from '$lib/protocol/messages';
import { hashOf } from '$lib/server/auth/tokens';
import { db } from '$lib/server/db/client';
import { note } from '$lib/server/db/schema/notes';
import { membership, session } from '$lib/server/db/schema/people';
import { loadDocument } from '$lib/server/notes/updates';
import type { Role } from '$lib/schemas/role';
import { connectPage, eventually, openPage } from '../support/page';
import { makeMember, makeTeam, signIn } from '../support/people';
import { RawSocket } from '../support/raw-socket';
import { startSyncBench, type SyncBench } from '../support/sync';

let bench: SyncBench;
let noteId: string;
beforeAll(async () => {
	bench = await startSyncBench();
	noteId = await bench.makeNote();
});
afterAll(() => bench.close());

const colleague = (role: Role) => makeMember(bench.engineer, role);
const enter = (headers: Record<string, string>, id = noteId) =>
	new RawSocket(bench.server, id, headers);

describe('a socket is refused', () => {
	test.each([
		'http://elsewhere.example',
		'null',
		'http://sub.localhost:4173',
		'http://localhost:4174',
		'https://localhost:4173',
		'http://localhost:4173.elsewhere.example',
	])('from the origin %s, whatever its cookie', async (origin) => {
		expect(await enter({ cookie: bench.cookie, origin }).end()).toBe(403);
	});

	test('without an origin', async () => {
		const socket = new RawSocket(bench.server, noteId, { cookie: bench.cookie, origin: '' });
		expect(await socket.end()).toBe(403);
	});

	test('without a cookie, with a wrong one, and with the hash of a right one', async () => {
		const [name, token] = bench.cookie.split('=') as [string, string];
		expect(await enter({}).end()).toBe(closeCode.signedOut);
		expect(await enter({ cookie: `${name}=wrong` }).end()).toBe(closeCode.signedOut);
		expect(await enter({ cookie: `${name}=${hashOf(token)}` }).end()).toBe(closeCode.signedOut);
	});

	test('to a reader, who sees frozen revisions only', async () => {
		const cookie = await signIn(await colleague('reader'));
		expect(await enter({ cookie }).end()).toBe(closeCode.forbidden);
	});

	test('to somebody of another team, with the answer for a note that does not exist', async () => {
		const cookie = await signIn(await makeMember(await makeTeam(), 'approver'));
		expect(await enter({ cookie }).end()).toBe(closeCode.notFound);
		const nowhere = '00000000-0000-4000-8000-000000000000';
		expect(await enter({ cookie }, nowhere).end()).toBe(closeCode.notFound);
	});

	test('at any other address', async () => {
		expect(await enter({ cookie: bench.cookie }, 'no-note').end()).toBe(404);
		expect(await enter({ cookie: bench.cookie }, `${noteId}/more`).end()).toBe(404);
	});
});

test('somebody who may read but not write is told so, and the edit is refused, not stored or shown', async () => {
	const cookie = await signIn(await colleague('administrator'));
	const peer = await openPage(bench.server, { noteId, cookie: bench.cookie });
	const before = await loadDocument(noteId);
	const socket = await enter({ cookie }).greeted();
	expect(socket.bodies<Hello>(messageType.hello)[0]).toMatchObject({ mayWrite: false });
	const doc = new Y.Doc();
	doc.getText('title').insert(0, 'Mine now ');
	const update = Y.encodeStateAsUpdate(doc);
	socket.send(encodeEdit('mine', update));
	// The same as a plain update of the sync protocol, which no page of ours sends.
	socket.send(Uint8Array.from([0, 2, update.length, ...update]));
	await eventually(() => socket.bodies<Refused>(messageType.refused).length === 2);
	expect(socket.bodies<Refused>(messageType.refused).map(({ id }) => id)).toEqual(['mine', '']);
	expect((await loadDocument(noteId)).seq).toBe(before.seq);
	expect(peer.title).toBe('Divider');
	expect(socket.socket.readyState).toBe(socket.socket.OPEN);
	await socket.close();
	peer.destroy();
});

test('presence carries the name of the session, whatever the page says', async () => {
	const someone = await makeMember(bench.engineer, 'engineer', 'Kim Sample');
	const [watcher, other] = await Promise.all([
		openPage(bench.server, { noteId, cookie: bench.cookie }),
		openPage(bench.server, { noteId, cookie: await signIn(someone) }),
	]);
	other.awareness.setLocalState({
		user: { id: 'x', name: 'Somebody Else', color: 'url(//x)' },
		cellId: 'a1',
	});
	await eventually(() => watcher.people.some(({ cellId }) => cellId === 'a1'));
	expect(watcher.people).toEqual([
		{
			id: someone.personId,
			name: 'Kim Sample',
			cellId: 'a1',
		},
	]);
	other.destroy();
	await eventually(() => watcher.people.every(({ id }) => id !== someone.personId));
	watcher.destroy();
});

test('a socket ends within seconds when its session does, and does not come back', async () => {
	const cookie = await signIn(bench.engineer);
	const page = await openPage(bench.server, { noteId, cookie });
	await db()
		.delete(session)
		.where(eq(session.sessionToken, hashOf(cookie.split('=')[1]!)));
	await eventually(() => page.connection === 'closed');
	expect(page.notice).toContain('signed out');
	expect(page.editable).toBe(false);
	page.destroy();
});

test('a lowered role takes the right to write away while the page is open', async () => {
	const someone = await colleague('engineer');
	const page = await openPage(bench.server, { noteId, cookie: await signIn(someone) });
	expect(page.editable).toBe(true);
	const setRole = (role: Role) =>
		db().update(membership).set({ role }).where(eq(membership.personId, someone.personId));
	await setRole('administrator');
	await eventually(() => !page.mayWrite);
	await setRole('reader');
	await eventually(() => page.connection === 'closed');
	page.destroy();
});

test('a page with a copy from before a restored backup is closed and merges nothing', async () => {
	const id = await bench.makeNote();
	const stale = await connectPage(bench.server, {
		noteId: id,
		cookie: bench.cookie,
		epoch: '00000000-0000-4000-8000-000000000000',
	});
	await eventually(() => stale.connection === 'closed');
	expect(stale.notice).toContain('restored');
	expect(stale.ready).toBe(false);
	stale.destroy();

	const page = await openPage(bench.server, { noteId: id, cookie: bench.cookie });
	await db().update(note).set({ epoch: crypto.randomUUID() }).where(eq(note.id, id));
	await eventually(() => page.connection === 'closed');
	page.destroy();
});
