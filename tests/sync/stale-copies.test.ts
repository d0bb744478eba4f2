import 'fake-indexeddb/auto';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { listKept } from '$lib/client/unsaved-store';
import type { WorkingCopy } from '$lib/client/working-copy.svelte';
import type { Actor } from '$lib/server/auth/access';
import { connectPage, contentOf, eventually, saved, storedContent, type } from '../support/page';
import { makeMember, signIn } from '../support/people';
import { startProxy, type Proxy } from '../support/proxy';
import { startSyncServer, syncUrl, type SyncServer } from '../support/server';
import { startSyncBench, type SyncBench } from '../support/sync';

const restarts = process.env.HALFDIGIT_LONG ? 20 : 2;
const pagesEach = 5;

let bench: SyncBench;
beforeAll(async () => {
	bench = await startSyncBench();
});
afterAll(() => bench.close());

interface Place {
	server: SyncServer;
	proxy: Proxy;
}

async function makePlace(): Promise<Place> {
	const server = await startSyncServer();
	return { server, proxy: await startProxy(server.port) };
}

test(`browsers that return with old unsaved edits after each of ${restarts} restarts of two processes double nothing`, async () => {
	const noteId = await bench.makeNote('');
	const places = [await makePlace(), await makePlace()];
	const people: { actor: Actor; cookie: string; place: Place }[] = [];
	for (const place of places) {
		for (let index = 0; index < pagesEach; index += 1) {
			const actor = await makeMember(bench.engineer, 'engineer');
			people.push({ actor, place, cookie: await signIn(actor) });
		}
	}
	const open = ({ actor, cookie, place }: (typeof people)[number]): Promise<WorkingCopy> =>
		connectPage(
			{ url: syncUrl(place.proxy.port) },
			{ noteId, cookie, person: { id: actor.personId, name: actor.name } },
		);
	const typed: string[] = [];
	for (let round = 0; round < restarts; round += 1) {
		const pages = await Promise.all(people.map(open));
		// Until a page has all of the note nothing can be typed in it; then it holds what was kept as well.
		await eventually(() => pages.every((page) => page.ready));
		await Promise.all(pages.map(saved));
		for (const { proxy } of places) proxy.cut();
		await eventually(() => pages.every(({ connection }) => connection === 'offline'));
		for (const [index, page] of pages.entries()) {
			const word = `p${index}r${round}`;
			typed.push(word);
			type(page, page.cells[0]!.id, `# ${word}\n`);
		}
		await eventually(() => pages.every(({ saving }) => saving.kept === saving.count));
		for (const page of pages) page.destroy();
		for (const place of places) {
			await place.server.stop(round % 2 ? 'SIGTERM' : 'SIGKILL');
			place.server = await startSyncServer();
			place.proxy.target = place.server.port;
			place.proxy.mend();
		}
	}
	const pages = await Promise.all(people.map(open));
	await eventually(() => pages.every((page) => page.ready));
	await Promise.all(pages.map(saved));
	const stored = await storedContent(noteId);
	const words = stored.cells[0]!.source.split('\n').filter(Boolean);
	expect(words.sort()).toEqual(typed.map((word) => `# ${word}`).sort());
	expect(stored.cells).toHaveLength(1);
	for (const page of pages) {
		await eventually(() => JSON.stringify(contentOf(page)) === JSON.stringify(stored));
		page.destroy();
	}
	for (const { actor } of people)
		await eventually(async () => (await listKept(actor.personId)).length === 0);
	for (const { server, proxy } of places) {
		await server.stop();
		await proxy.close();
	}
}, 600_000);
