import { log } from '$lib/server/log';
import { fold } from '$lib/server/notes/folding';
import * as snapshots from '$lib/server/notes/snapshots';

/** Keeps a note quick to open: a snapshot whenever its log has grown by some hundred updates, and old updates folded. */
export class Upkeep {
	readonly #noteId: string;
	#snapshotSeq: number;
	#running: Promise<void> | undefined;
	#stopped = false;

	constructor(noteId: string, snapshotSeq: number) {
		this.#noteId = noteId;
		this.#snapshotSeq = snapshotSeq;
	}

	/** Hears that a document is exactly what is stored at `seq`; takes its state if a snapshot is due. */
	offer(seq: number, state: () => Uint8Array): void {
		const isDue = seq - this.#snapshotSeq >= snapshots.snapshotEvery;
		if (!isDue || this.#running || this.#stopped) return;
		this.#running = this.#run(seq, state());
	}

	/** Settles when nothing is being written. */
	async idle(): Promise<void> {
		await this.#running;
	}

	stop(): void {
		this.#stopped = true;
	}

	async #run(seq: number, state: Uint8Array): Promise<void> {
		try {
			await snapshots.write(this.#noteId, seq, state);
			this.#snapshotSeq = seq;
			if (!this.#stopped) await fold(this.#noteId);
		} catch (error) {
			// Nothing depends on it. The next change tries again; where another process folds, this one is refused.
			log().warn({ err: error, noteId: this.#noteId }, 'the upkeep of a note was put off');
		}
		this.#running = undefined;
	}
}
