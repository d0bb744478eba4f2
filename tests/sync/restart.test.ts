import { readFileSync } from 'node:fs';
import type { WorkingCopy } from '$lib/client/working-copy.svelte';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { probeLag } from '../support/lag';
import {
	connectPage,
	contentOf,
	eventually,
	openPage,
	saved,
	storedContent,
	type,
} from '../support/page';
import { makeMember, signIn } from '../support/people';
import { startProxy, type Proxy } from '../support/proxy';
import { startSyncServer, syncUrl, type SyncServer } from '../support/server';
import { startSyncBench, type SyncBench } from '../support/sync';

let bench: SyncBench;
beforeAll(async () => {
	bench = await startSyncBench();
});
afterAll(() => bench.close());

const isLong = Boolean(process.env.HALFDIGIT_LONG);

interface Place {
	proxy: Proxy;
	server: SyncServer;
}

async function place(): Promise<Place> {
	const server = await startSyncServer();
	return { server, proxy: await startProxy(server.port) };
}

/** Ends the process in good order and leads its pages to a new one. */
async function restart(at: Place): Promise<void> {
	const next = await startSyncServer();
	const ending = at.server.stop('SIGTERM');
	at.proxy.target = next.port;
	expect(await ending).toBe(0);
	at.server = next;
}

test('two processes restarted one after the other, while six people type, lose and double nothing', async () => {
	const noteId = await bench.makeNote('');
	const places = [await place(), await place()];
	const pages = await Promise.all(
		[0, 1, 0, 1, 0, 1].map((index) =>
			openPage({ url: syncUrl(places[index]!.proxy.port) }, { noteId, cookie: bench.cookie }),
		),
	);
	// Text, so that the figures of some thousand lines are not computed at each key.
	const cellId = pages[0]!.addCell('text', null)!;
	await eventually(() => pages.every((page) => page.textOf(cellId)));
	let typing = true;
	const typed: string[] = [];
	const states = new Set<string>();
	const write = async () => {
		for (let round = 0; typing; round += 1) {
			for (const [index, page] of pages.entries()) {
				type(page, cellId, `p${index}r${round}\n`);
				typed.push(`p${index}r${round}`);
				states.add(page.saving.state).add(page.connection);
			}
			await new Promise((resolve) => setTimeout(resolve, 40));
		}
	};
	const writing = write();
	for (const each of places) await restart(each);
	typing = false;
	await writing;
	await Promise.all(pages.map((page) => saved(page)));
	const stored = await storedContent(noteId);
	const source = stored.cells.find(({ id }) => id === cellId)!.source;
	expect(source.split('\n').filter(Boolean).sort()).toEqual(typed.sort());
	for (const page of pages) {
		await eventually(() => JSON.stringify(contentOf(page)) === JSON.stringify(stored));
		page.destroy();
	}
	// Nobody was asked anything: it went on by itself.
	expect(states).not.toContain('refused');
	expect(states).not.toContain('closed');
	for (const { server, proxy } of places) {
		expect(await server.stop()).toBe(0);
		await proxy.close();
	}
}, 120_000);

/** Processor time that a process has used (Linux). */
function cpuSeconds(pid: number): number {
	const fields = readFileSync(`/proc/${pid}/stat`, 'utf8').split(') ')[1]?.split(' ') ?? [];
	return (Number(fields[11]) + Number(fields[12])) / 100;
}

const crowd = isLong
	? { notes: 200, pages: 5, limitMs: 30_000, lagMs: 1000 }
	: { notes: 20, pages: 5, limitMs: 30_000, lagMs: 1000 };

test(`${crowd.notes * crowd.pages} pages are complete again within ${crowd.limitMs / 1000} s of a restart`, async () => {
	const at = await place();
	const url = syncUrl(at.proxy.port);
	const noteIds: string[] = [];
	for (let index = 0; index < crowd.notes; index += 1) noteIds.push(await bench.makeNote());
	const cookies = await Promise.all(
		Array.from({ length: Math.ceil((crowd.notes * crowd.pages) / 50) }, async () =>
			signIn(await makeMember(bench.engineer, 'engineer')),
		),
	);
	const pages: WorkingCopy[] = [];
	for (const [index, noteId] of noteIds.entries()) {
		const opened = Array.from({ length: crowd.pages }, (_, page) => {
			const cookie = cookies[(index * crowd.pages + page) % cookies.length]!;
			return connectPage({ url }, { noteId, cookie });
		});
		pages.push(...(await Promise.all(opened)));
	}
	await eventually(() => pages.every(({ ready }) => ready), 120_000);

	const next = await startSyncServer();
	const probe = probeLag(next.port);
	// A process that does nothing is as slow as the machine is.
	const idleProbe = probeLag(bench.server.port);
	await at.server.stop('SIGKILL');
	await eventually(() => pages.every(({ connection }) => connection !== 'online'), 60_000);
	const start = performance.now();
	at.proxy.target = next.port;
	// A title that is saved on a page is one that it has sent over the new connection.
	for (const page of pages.slice(0, 20)) page.setTitle('After the restart');
	await eventually(() => pages.every(({ connection }) => connection === 'online'), 120_000);
	await Promise.all(pages.slice(0, 20).map((page) => saved(page)));
	const tookMs = performance.now() - start;
	const [lagMs, idleMs] = await Promise.all([probe.stop(), idleProbe.stop()]);
	const figures = [tookMs, lagMs, idleMs, cpuSeconds(next.pid) * 1000].map((ms) => ms.toFixed(0));
	process.stdout.write(
		`${pages.length} pages: back, slowest answer, idle process, processor: ${figures.join(', ')} ms\n`,
	);
	expect(lagMs).toBeGreaterThan(0);
	// What the time on the clock says depends on what else runs; the processor time does not.
	expect(cpuSeconds(next.pid)).toBeLessThan(5 + pages.length / 100);
	if (isLong) {
		expect(tookMs).toBeLessThan(crowd.limitMs);
		expect(lagMs).toBeLessThan(crowd.lagMs + 2 * idleMs);
	}
	for (const page of pages) page.destroy();
	await next.stop();
	await at.proxy.close();
}, 300_000);
