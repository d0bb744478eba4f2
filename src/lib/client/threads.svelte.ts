import type { Anchor, Thread, threadKinds } from '$lib/schemas/comments';
import type { TrialChange } from '$lib/schemas/trial';
import { call } from './call';

/** What is said in a comment. */
export interface Said {
	body: string;
	/** Changed inputs that it speaks of. */
	trial?: readonly TrialChange[] | undefined;
}

interface NewThread extends Said {
	kind: (typeof threadKinds)[number];
	blocking: boolean;
	/** The stretch of the cell that it is about. */
	anchor?: Anchor | undefined;
}

interface Named {
	id: string;
	name: string;
}

/** Threads of a note in the page. What fails throws an Error with a sentence to show; what was typed stays with the caller. */
export class Threads {
	readonly #address: string;
	readonly #peopleAddress: string;
	#people: Promise<Named[]> | undefined;
	#list = $state.raw<readonly Thread[]>([]);
	#refreshing: Promise<void> | undefined;
	#stale = false;

	/** `number` as in addresses, MN-014; `threads` as the page was loaded with. */
	constructor(number: string, threads: readonly Thread[]) {
		this.#address = `/api/notes/${number}/threads`;
		this.#peopleAddress = `/api/notes/${number}/people`;
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

	/** With `answers` it hands the thread back to whoever opened it. */
	async reply(threadId: string, said: Said & { answers?: boolean }): Promise<Thread> {
		const address = `${this.#address}/${threadId}/comments`;
		return this.#take(await call<Thread>('POST', address, said));
	}

	/** Closes a thread or opens it again. */
	async setClosed(threadId: string, closed: boolean): Promise<Thread> {
		return this.#take(await call<Thread>('PATCH', `${this.#address}/${threadId}`, { closed }));
	}

	/** Lets a thread block freezing, or no longer. */
	async setBlocking(threadId: string, blocking: boolean): Promise<Thread> {
		return this.#take(await call<Thread>('PATCH', `${this.#address}/${threadId}`, { blocking }));
	}

	/** People who can be named in a comment. */
	people(): Promise<Named[]> {
		return (this.#people ??= call<Named[]>('GET', this.#peopleAddress).catch((error: unknown) => {
			this.#people = undefined;
			throw error;
		}));
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
