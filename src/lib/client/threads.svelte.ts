import type { Thread, threadKinds } from '$lib/schemas/comments';
import type { TrialChange } from '$lib/schemas/trial';
import { call } from './call';

interface NewThread {
	kind: (typeof threadKinds)[number];
	blocking: boolean;
	body: string;
	/** Changed inputs that it speaks of. */
	trial?: readonly TrialChange[] | undefined;
}

/** Threads of a note in the page. What fails throws an Error with a sentence to show; what was typed stays with the caller. */
export class Threads {
	readonly #address: string;
	#list = $state.raw<readonly Thread[]>([]);
	#refreshing: Promise<void> | undefined;
	#stale = false;

	/** `number` as in addresses, MN-014; `threads` as the page was loaded with. */
	constructor(number: string, threads: readonly Thread[]) {
		this.#address = `/api/notes/${number}/threads`;
		this.#list = threads;
	}

	/** All threads, open and closed. */
	get list(): readonly Thread[] {
		return this.#list;
	}

	/** Threads of a cell. */
	of(cellId: string): readonly Thread[] {
		return this.#list.filter((thread) => thread.cellId === cellId);
	}

	/** Opens a thread on a cell and returns it. */
	async open(cellId: string, thread: NewThread): Promise<Thread> {
		return this.#take(await call<Thread>('POST', this.#address, { cellId, ...thread }));
	}

	async reply(threadId: string, said: Pick<NewThread, 'body' | 'trial'>): Promise<Thread> {
		const address = `${this.#address}/${threadId}/comments`;
		return this.#take(await call<Thread>('POST', address, said));
	}

	/** Closes a thread or opens it again. */
	async setClosed(threadId: string, closed: boolean): Promise<Thread> {
		return this.#take(await call<Thread>('PATCH', `${this.#address}/${threadId}`, { closed }));
	}

	/** Reads all threads anew. Asked for while one reading runs, another follows it. */
	async refresh(): Promise<void> {
		this.#stale = true;
		this.#refreshing ??= this.#refresh();
		await this.#refreshing;
	}

	async #refresh(): Promise<void> {
		try {
			while (this.#stale) {
				this.#stale = false;
				this.#list = await call<Thread[]>('GET', this.#address);
			}
		} finally {
			this.#refreshing = undefined;
		}
	}

	#take(thread: Thread): Thread {
		const isKnown = this.#list.some(({ id }) => id === thread.id);
		this.#list = isKnown
			? this.#list.map((known) => (known.id === thread.id ? thread : known))
			: [...this.#list, thread];
		return thread;
	}
}
