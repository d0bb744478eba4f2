import { vi } from 'vitest';
import { WebSocket, type ClientOptions } from 'ws';
import type { Evaluation } from '$lib/calc/results';
import { WorkingCopy } from '$lib/client/working-copy.svelte';
import { toContent, type NoteContent } from '$lib/note/document';
import { loadDocument } from '$lib/server/notes/updates';
import { env } from '$lib/server/env';
import type { SyncServer } from './server';

const nothing: Evaluation = {
	engine: '',
	quantities: {},
	lines: [],
	requirements: [],
	figures: [],
	errors: [],
};

interface Visit {
	noteId: string;
	cookie: string;
	epoch?: string;
	person?: { id: string; name: string };
	/** The kind of socket the page uses, where a test wants to see or disturb what goes over it. */
	Socket?: new (url: string, protocols: string[], options: ClientOptions) => WebSocket;
}

/** A page that has a note open: the same working copy as in a browser, over a socket of Node's. */
export async function openPage(
	server: Pick<SyncServer, 'url'>,
	visit: Visit,
): Promise<WorkingCopy> {
	const page = await connectPage(server, visit);
	await eventually(() => page.ready);
	return page;
}

/** A page that only begins to connect. */
export async function connectPage(
	server: Pick<SyncServer, 'url'>,
	{ noteId, cookie, epoch, person = { id: '', name: '' }, Socket = WebSocket }: Visit,
): Promise<WorkingCopy> {
	class PageSocket extends Socket {
		constructor(url: string, protocols: string[]) {
			super(url, protocols, { headers: { cookie, origin: env().ORIGIN } });
		}
	}
	return new WorkingCopy({
		noteId,
		number: '',
		epoch: epoch ?? (await loadDocument(noteId)).epoch,
		person,
		content: { title: '', cells: [] },
		evaluation: nothing,
		server: {
			url: server.url,
			WebSocket: PageSocket as unknown as typeof globalThis.WebSocket,
		},
	});
}

/** What the page's document holds. */
export function contentOf(page: WorkingCopy): NoteContent {
	return toContent(page.doc);
}

/** What the database holds. */
export async function storedContent(noteId: string): Promise<NoteContent> {
	return toContent((await loadDocument(noteId)).doc);
}

/** Waits until the condition holds. */
export async function eventually(condition: () => unknown, timeout = 20_000): Promise<void> {
	// Made here, so that its stack names the caller.
	const late = new Error('this did not come true in time');
	await vi.waitFor(
		async () => {
			if (!(await condition())) throw late;
		},
		{ timeout, interval: 10 },
	);
}

/** Waits until everything typed in the page is stored. */
export async function saved(page: WorkingCopy): Promise<void> {
	await eventually(() => page.saving.state === 'saved' && page.saving.count === 0);
}

export function type(page: WorkingCopy, cellId: string, text: string): void {
	const source = page.textOf(cellId);
	if (!source) throw new Error(`there is no cell ${cellId}`);
	source.insert(source.length, text);
}
