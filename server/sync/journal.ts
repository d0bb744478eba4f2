import { AppError } from '$lib/errors';
import { log } from '$lib/server/log';
import type { Appended, Edit } from '$lib/server/notes/append';
import { maxUnsaved } from './limits';
import { writer } from './writer';

/** An edit on its way into the database, and whom to tell when it is there. */
export interface Entry<Sender> extends Edit {
	/** Pages that sent it: the same person's tabs may send what one of them had kept. */
	senders: Sender[];
}

interface Events<Sender> {
	onSaved(entries: readonly Entry<Sender>[], appended: Appended): void;
	/** The database will never take these edits; the document in memory is not what is stored. */
	onFailed(error: unknown, entries: readonly Entry<Sender>[]): void;
}

const maxBatch = { edits: 500, bytes: 4 * 1024 * 1024 };

/**
 * Brings a room's edits into the database in the order they came: whatever gathers while one transaction
 * runs makes the next. While the database is away it tries again, with growing pauses, and tells nobody
 * that anything was saved.
 */
export class Journal<Sender> {
	readonly #noteId: string;
	readonly #events: Events<Sender>;
	readonly #unsaved = new Map<string, Entry<Sender>>();
	#bytes = 0;
	#running: Promise<void> | undefined;
	#stopped = false;
	#wake: (() => void) | undefined;

	constructor(noteId: string, events: Events<Sender>) {
		this.#noteId = noteId;
		this.#events = events;
	}

	get isEmpty(): boolean {
		return this.#unsaved.size === 0;
	}

	/** False while it keeps so much that nothing more can be taken. */
	get hasRoom(): boolean {
		return this.#unsaved.size < maxUnsaved.edits && this.#bytes < maxUnsaved.bytes;
	}

	/** Takes an edit. One that is on its way already is not taken twice, but told to all who sent it. */
	add(entry: Entry<Sender>): void {
		const known = this.#unsaved.get(entry.id);
		if (known) {
			known.senders.push(...entry.senders.filter((sender) => !known.senders.includes(sender)));
			return;
		}
		this.#unsaved.set(entry.id, entry);
		this.#bytes += entry.bytes.length;
		this.#running ??= this.#run();
	}

	/** Settles when everything taken so far is stored, or the journal was stopped. */
	async idle(): Promise<void> {
		await this.#running;
	}

	stop(): void {
		this.#stopped = true;
		this.#wake?.();
	}

	async #run(): Promise<void> {
		let pauseMs = 50;
		while (this.#unsaved.size > 0 && !this.#stopped) {
			const batch = this.#nextBatch();
			try {
				const appended = await writer.append(this.#noteId, batch);
				for (const entry of batch) {
					this.#unsaved.delete(entry.id);
					this.#bytes -= entry.bytes.length;
				}
				pauseMs = 50;
				this.#events.onSaved(batch, appended);
			} catch (error) {
				log().warn({ err: error, noteId: this.#noteId }, 'edits could not be stored');
				if (isFinal(error)) {
					this.#stopped = true;
					this.#events.onFailed(error, batch);
					break;
				}
				await this.#pause(pauseMs * (0.5 + Math.random()));
				pauseMs = Math.min(pauseMs * 2, 2000);
			}
		}
		this.#running = undefined;
	}

	#nextBatch(): Entry<Sender>[] {
		const batch: Entry<Sender>[] = [];
		let bytes = 0;
		for (const entry of this.#unsaved.values()) {
			bytes += entry.bytes.length;
			if (batch.length === maxBatch.edits || (batch.length > 0 && bytes > maxBatch.bytes)) break;
			batch.push(entry);
		}
		return batch;
	}

	#pause(ms: number): Promise<void> {
		return new Promise((resolve) => {
			const timer = setTimeout(resolve, ms);
			this.#wake = () => {
				clearTimeout(timer);
				resolve();
			};
		});
	}
}

/** Whether trying again cannot help: the note is gone, or PostgreSQL refuses the data itself (SQLSTATE classes 22, 23, 42). */
function isFinal(error: unknown): boolean {
	for (let cause = error; cause instanceof Error; cause = cause.cause) {
		if (cause instanceof AppError) return cause.code !== 'unavailable';
		if ('code' in cause && /^(22|23|42)...$/.test(String(cause.code))) return true;
	}
	return false;
}
