import { engineVersion } from '$lib/calc/engine';
import * as store from '$lib/server/evaluation/store';
import { log } from '$lib/server/log';

const pauseMs = 1000;

/** Writes a room's newest results, at once and then no more often than once a second. */
export class ResultStore {
	readonly #noteId: string;
	#next: store.Stored | undefined;
	#writtenSeq = -1;
	#running: Promise<void> | undefined;
	#hurry: (() => void) | undefined;
	#stopped = false;

	constructor(noteId: string) {
		this.#noteId = noteId;
	}

	/** The stored results of a note, if this engine made them. */
	static async read(noteId: string): Promise<store.Stored | undefined> {
		const stored = await store.find(noteId);
		return stored?.results.engine === engineVersion ? stored : undefined;
	}

	keep(results: store.Stored): void {
		if (this.#stopped || results.seq <= this.#writtenSeq) return;
		this.#next = results;
		this.#running ??= this.#run();
	}

	/** Settles when the newest results are written. */
	async idle(): Promise<void> {
		this.#hurry?.();
		await this.#running;
	}

	stop(): void {
		this.#stopped = true;
		this.#hurry?.();
	}

	async #run(): Promise<void> {
		while (this.#next && !this.#stopped) {
			const writing = this.#next;
			this.#next = undefined;
			try {
				await store.save(this.#noteId, writing);
				this.#writtenSeq = writing.seq;
			} catch (error) {
				// A page that finds stored results too old has them computed; the next change writes anew.
				log().warn({ err: error, noteId: this.#noteId }, 'results could not be stored');
			}
			await this.#pause();
		}
		this.#running = undefined;
	}

	#pause(): Promise<void> {
		return new Promise((resolve) => {
			const done = () => {
				clearTimeout(timer);
				this.#hurry = undefined;
				resolve();
			};
			const timer = setTimeout(done, pauseMs);
			this.#hurry = done;
		});
	}
}
