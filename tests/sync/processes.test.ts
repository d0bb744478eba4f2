import { afterAll, beforeAll, expect, test } from 'vitest';
import { sql } from 'drizzle-orm';
import { db } from '$lib/server/db/client';
import { titleOf } from '$lib/note/document';
import { notify } from '$lib/server/db/notify';
import { change } from '$lib/server/notes/updates';
import { contentOf, eventually, openPage, saved, storedContent, type } from '../support/page';
import { runEntry, startSyncServer, type SyncServer } from '../support/server';
import { makeMember, signIn } from '../support/people';
import { startHintProxy } from '../support/hint-proxy';
import { startSyncBench, type SyncBench } from '../support/sync';

let bench: SyncBench;
let second: SyncServer;
beforeAll(async () => {
	bench = await startSyncBench();
	second = await startSyncServer();
});
afterAll(async () => {
	await second.stop();
	await bench.close();
});

test('pages on two processes that are typed in at once end with the same content, which is stored', async () => {
	const noteId = await bench.makeNote('');
	const pages = await Promise.all(
		[bench.server, second, bench.server, second].map((server) =>
			openPage(server, { noteId, cookie: bench.cookie }),
		),
	);
	for (let round = 0; round < 25; round += 1) {
		for (const [index, page] of pages.entries()) {
			type(page, page.cells[0]!.id, `p${index}r${round} = 1\n`);
		}
		await Promise.resolve();
	}
	await Promise.all(pages.map((page) => saved(page)));
	const stored = await storedContent(noteId);
	expect(stored.cells[0]!.source.split('\n')).toHaveLength(101);
	for (const page of pages) {
		await eventually(() => contentOf(page).cells[0]!.source === stored.cells[0]!.source);
	}
	for (const page of pages) page.destroy();
});

test('an edit of which no hint was heard is found within the poll', async () => {
	const noteId = await bench.makeNote();
	const page = await openPage(bench.server, { noteId, cookie: bench.cookie });
	await change(noteId, bench.engineer.personId, (doc) => titleOf(doc).insert(0, 'Unheard '));
	await eventually(() => page.title === 'Unheard Divider');
	page.destroy();
});

const listening = sql`select pid from pg_stat_activity
	where datname = current_database() and query like 'listen %'`;
const listeners = () => db().execute(listening);

/** A note on both processes. */
async function openBoth() {
	const noteId = await bench.makeNote();
	const page = await openPage(bench.server, { noteId, cookie: bench.cookie });
	const peer = await openPage(second, { noteId, cookie: bench.cookie });
	return { noteId, page, peer };
}

const cuts = process.env.HALFDIGIT_LONG ? 20 : 4;

test(`a process whose listening connection is cut, ${cuts} times, hears of everything again`, async () => {
	const { page, peer } = await openBoth();
	const news: string[] = [];
	page.onNews((about) => news.push(about));
	for (let round = 1; round <= cuts; round += 1) {
		await eventually(async () => (await listeners()).rowCount === 2);
		await db().execute(sql`select pg_terminate_backend(pid) from (${listening}) listening`);
		// Each time it listens again it tells of what it may have missed.
		await eventually(() => news.length >= 2 * round);
		peer.setTitle(`Round ${round}`);
		await eventually(() => page.title === `Round ${round}`);
	}
	page.destroy();
	peer.destroy();
});

test.each(['drop', 'mangle'] as const)(
	'whatever becomes of the hints, processes end with the same content and people: %s',
	async (fate) => {
		const address = new URL(bench.databaseUrl);
		const proxy = await startHintProxy(Number(address.port));
		address.port = String(proxy.port);
		const third = await startSyncServer({ DATABASE_URL: address.href });
		const noteId = await bench.makeNote('');
		const someone = await makeMember(bench.engineer, 'engineer', 'Kim Sample');
		const [page, peer] = await Promise.all([
			openPage(bench.server, { noteId, cookie: bench.cookie }),
			openPage(third, { noteId, cookie: await signIn(someone) }),
		]);
		proxy.fate = fate;
		for (let line = 1; line <= 40; line += 1) {
			type(page, page.cells[0]!.id, `a${line} = 1\n`);
			type(peer, peer.cells[0]!.id, `b${line} = 1\n`);
			if (line % 10 === 0) await saved(page);
		}
		await Promise.all([saved(page), saved(peer)]);
		const writtenAt = performance.now();
		const stored = await storedContent(noteId);
		expect(stored.cells[0]!.source.split('\n')).toHaveLength(81);
		for (const each of [page, peer]) {
			await eventually(() => JSON.stringify(contentOf(each)) === JSON.stringify(stored));
		}
		// A poll later at the latest, on a busy machine too.
		expect(performance.now() - writtenAt).toBeLessThan(4000);
		await eventually(() => proxy.count > 0);
		// The third process still tells of itself.
		await eventually(() => page.people.some(({ name }) => name === 'Kim Sample'));
		page.destroy();
		peer.destroy();
		await third.stop();
		await proxy.close();
	},
);

test('people are seen on every process, where they are, until they leave', async () => {
	const noteId = await bench.makeNote();
	const someone = await makeMember(bench.engineer, 'engineer', 'Kim Sample');
	const page = await openPage(bench.server, { noteId, cookie: bench.cookie });
	const theirs = await openPage(second, { noteId, cookie: await signIn(someone) });
	const [cell] = page.cells.map(({ id }) => id) as [string];
	theirs.setPlace(cell);
	await eventually(() => page.people.some(({ cellId }) => cellId === cell));
	expect(page.people).toMatchObject([{ id: someone.personId, name: 'Kim Sample', cellId: cell }]);
	await eventually(() => theirs.people.length === 1);
	// One who comes later sees them at once, as the other process is asked.
	const late = await openPage(bench.server, { noteId, cookie: bench.cookie });
	await eventually(() => late.people.some(({ cellId }) => cellId === cell));
	theirs.destroy();
	await eventually(() => page.people.every(({ id }) => id !== someone.personId));
	page.destroy();
	late.destroy();
});

// How long that takes is tested without waiting beside `People`.
if (process.env.HALFDIGIT_LONG)
	test('people of a process that was killed are forgotten', async () => {
		const noteId = await bench.makeNote();
		const doomed = await startSyncServer();
		const someone = await makeMember(bench.engineer, 'engineer', 'Kim Sample');
		const page = await openPage(bench.server, { noteId, cookie: bench.cookie });
		const theirs = await openPage(doomed, { noteId, cookie: await signIn(someone) });
		await eventually(() => page.people.length === 1);
		await doomed.stop('SIGKILL');
		await eventually(() => page.people.length === 0, 30_000);
		page.destroy();
		theirs.destroy();
	});

test('news of comments reaches the pages of that note, on every process', async () => {
	const noteId = await bench.makeNote();
	const elsewhere = await bench.makeNote();
	const heard: string[] = [];
	const pages = await Promise.all([
		openPage(bench.server, { noteId, cookie: bench.cookie }),
		openPage(second, { noteId, cookie: bench.cookie }),
		openPage(second, { noteId: elsewhere, cookie: bench.cookie }),
	]);
	for (const [index, page] of pages.entries()) {
		page.onNews((about) => heard.push(`${index} ${about}`));
	}
	await notify(noteId, 'comments');
	await notify(elsewhere, 'review');
	await eventually(() => heard.length === 3);
	expect(heard.sort()).toEqual(['0 comments', '1 comments', '2 review']);
	for (const page of pages) page.destroy();
});

test('a process does not start with heap flags in NODE_OPTIONS, or without its settings', async () => {
	const flagged = await runEntry({ ROLES: 'sync', NODE_OPTIONS: '--max-old-space-size=512' });
	expect(flagged.code).toBe(1);
	expect(flagged.errors).toContain('NODE_OPTIONS holds --max-old-space-size=512');
	const lacking = await runEntry({ ROLES: 'sync', NODE_OPTIONS: '', DATABASE_URL: '' });
	expect(lacking.code).toBe(1);
	expect(lacking.errors).toContain('DATABASE_URL');
	const idle = await runEntry({ ROLES: 'cooking' });
	expect(idle.errors).toContain('ROLES: must be some of web, sync');
});
