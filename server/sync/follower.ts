import { log } from '$lib/server/log';
import type { Appended } from '$lib/server/notes/append';
import * as updates from '$lib/server/notes/updates';

interface Events {
	/** Brings rows of the log into the document, in order. Throws where that fails. */
	apply: (rows: readonly updates.Row[]) => void;
	/** Everything that was heard of is in the document. */
	onCaughtUp: () => void;
}

/** How far a room's document has followed its note's log, and what brings it further. */
export class Follower {
	readonly #noteId: string;
	readonly #events: Events;
	/** Everything in the log up to here is in the document. */
	#seq: number;
	#heardOf: number;
	#reading: Promise<void> | undefined;

	constructor(noteId: string, seq: number, events: Events) {
		this.#noteId = noteId;
		this.#seq = this.#heardOf = seq;
		this.#events = events;
	}

	get seq(): number {
		return this.#seq;
	}

	get isBehind(): boolean {
		return this.#heardOf > this.#seq;
	}

	/** Hears that the log has grown to `seq`, and reads what is missing. */
	hear(seq: number): void {
		// Anybody who may use the database can send a hint; what is no number would be heard of for ever.
		if (!Number.isSafeInteger(seq)) return;
		this.#heardOf = Math.max(this.#heardOf, seq);
		if (this.isBehind) this.#reading ??= this.#read();
	}

	/** The room's own edits were stored. Rows of other processes may lie before them; those are read then. */
	stored({ seq, first }: Appended): void {
		if (first !== undefined && first <= this.#seq + 1) this.#seq = Math.max(this.#seq, seq);
		this.hear(seq);
	}

	/** Settles when nothing is being read. */
	async idle(): Promise<void> {
		await this.#reading;
	}

	async #read(): Promise<void> {
		try {
			while (this.isBehind) {
				const rows = await updates.rowsSince(this.#noteId, this.#seq);
				const last = rows.at(-1);
				// A hint that promised more than there is.
				if (!last) this.#heardOf = this.#seq;
				else {
					this.#events.apply(rows);
					this.#seq = Math.max(this.#seq, last.seq);
				}
			}
			this.#events.onCaughtUp();
		} catch (error) {
			// The next poll hears of the same rows, and they are read again.
			log().warn({ err: error, noteId: this.#noteId }, 'a room could not catch up');
		}
		this.#reading = undefined;
	}
}
