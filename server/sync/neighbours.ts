import type { Presence } from '$lib/protocol/presence';
import { maxHintBytes, tell, type ProcessHint } from '$lib/server/db/notify';
import { randomUUID } from 'node:crypto';
import type { Entry } from './people';

/** A process of which nothing was heard for so long is gone. */
const goneMs = 15_000;
/** Cursors move more often than others need to see. */
const peopleMs = 100;

/**
 * The other processes on this database, and what they are told of this one: hints, each of which may be lost. While
 * there is no other process nothing is sent but that this one runs.
 */
export class Neighbours {
	readonly #id = randomUUID();
	readonly #send: (hint: ProcessHint) => Promise<void>;
	readonly #heardAt = new Map<string, number>();
	#seqs = new Map<string, number>();
	#people = new Map<string, Map<number, Entry>>();
	#asks = new Set<string>();
	#sending: Promise<void> | undefined;
	#timer: NodeJS.Timeout | undefined;

	constructor(send: (hint: ProcessHint) => Promise<void> = tell) {
		this.#send = send;
	}

	/** Whether there is another process. */
	get exist(): boolean {
		const now = performance.now();
		for (const [id, at] of this.#heardAt) if (now - at > goneMs) this.#heardAt.delete(id);
		return this.#heardAt.size > 0;
	}

	/** Hears a process; `own` where it is this one, `new` where it was unknown. */
	hear(from: string): 'own' | 'new' | 'known' {
		if (from === this.#id) return 'own';
		const known = this.#heardAt.has(from);
		this.#heardAt.set(from, performance.now());
		return known ? 'known' : 'new';
	}

	/** Says that this process runs. */
	beat(): void {
		void this.#send({ from: this.#id });
	}

	/** Tells that a log has grown, as soon as the hint before is sent. */
	announce(noteId: string, seq: number): void {
		if (!this.exist) return;
		this.#seqs.set(noteId, Math.max(seq, this.#seqs.get(noteId) ?? 0));
		this.#sending ??= this.#flush();
	}

	/** Asks who is in a note elsewhere. */
	ask(noteId: string): void {
		if (!this.exist) return;
		this.#asks.add(noteId);
		this.#sending ??= this.#flush();
	}

	/** Tells who is in a note, in a moment. */
	sayPeople(noteId: string, entries: readonly Entry[]): void {
		if (entries.length === 0 || !this.exist) return;
		const people = this.#people.get(noteId) ?? new Map<number, Entry>();
		this.#people.set(noteId, people);
		for (const entry of entries) people.set(entry.clientId, entry);
		this.#timer ??= setTimeout(() => {
			this.#sending ??= this.#flush();
		}, peopleMs);
	}

	/** Sends what waits. */
	async stop(): Promise<void> {
		await (this.#sending ??= this.#flush());
		clearTimeout(this.#timer);
	}

	async #flush(): Promise<void> {
		// One turn later, so that what is said in one go makes one hint.
		await Promise.resolve();
		while (this.#seqs.size + this.#people.size + this.#asks.size > 0) {
			clearTimeout(this.#timer);
			this.#timer = undefined;
			const said = { seqs: this.#seqs, people: this.#people, asks: this.#asks };
			this.#seqs = new Map();
			this.#people = new Map();
			this.#asks = new Set();
			for (const hint of hints(this.#id, said)) await this.#send(hint);
		}
		this.#sending = undefined;
	}
}

interface Said {
	seqs: ReadonlyMap<string, number>;
	people: ReadonlyMap<string, ReadonlyMap<number, Entry>>;
	asks: ReadonlySet<string>;
}

/** Hints that say all of it, each short enough to be sent. */
function hints(from: string, { seqs, people, asks }: Said): ProcessHint[] {
	const made: Required<ProcessHint>[] = [];
	let bytes = Infinity;
	const roomFor = (piece: unknown): Required<ProcessHint> => {
		const more = Buffer.byteLength(JSON.stringify(piece)) + 60;
		bytes += more;
		if (bytes > maxHintBytes) {
			made.push({ from, seqs: {}, people: {}, asks: [] });
			bytes = 100 + more;
		}
		return made.at(-1)!;
	};
	for (const noteId of asks) roomFor(noteId).asks.push(noteId);
	for (const [noteId, seq] of seqs) roomFor(seq).seqs[noteId] = seq;
	for (const [noteId, entries] of people) {
		for (const { clientId, clock, state } of entries.values()) {
			const entry: [number, number, Presence | null] = [clientId, clock, state];
			(roomFor(entry).people[noteId] ??= []).push(entry);
		}
	}
	return made;
}
