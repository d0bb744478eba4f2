import { encodeJson, type Authors } from '$lib/protocol/messages';
import { log } from '$lib/server/log';
import * as authorship from '$lib/server/notes/authorship';

type Author = Awaited<ReturnType<typeof authorship.read>>[number];

const pauseMs = 300;

/**
 * Who wrote last in each cell of a room's note, as far as it is stored. Whichever process stored an update, the pages
 * hear of its author within about 300 ms; people who type on do not make a message for each key.
 */
export class CellAuthors {
	readonly #noteId: string;
	readonly #tell: (message: Uint8Array) => void;
	readonly #last = new Map<string, Author>();
	#asked = new Set<string>();
	/** Known, but not told yet. */
	#news = new Map<string, Author>();
	#timer: NodeJS.Timeout | undefined;
	#stopped = false;

	constructor(noteId: string, stored: readonly Author[], tell: (message: Uint8Array) => void) {
		this.#noteId = noteId;
		this.#tell = tell;
		for (const author of stored) this.#last.set(author.cellId, author);
	}

	/** The authors of these cells, for a page that has just come. */
	of(cellIds: Iterable<string>): Uint8Array {
		return encode([...cellIds].flatMap((id) => this.#last.get(id) ?? []));
	}

	/** Hears who wrote in cells, in the order in which it was stored. */
	know(authors: readonly Author[]): void {
		for (const author of authors) this.#take(author);
		this.#wait();
	}

	/** Hears that updates which changed these cells are stored, but not whose they are. */
	hear(cellIds: Iterable<string>): void {
		for (const id of cellIds) this.#asked.add(id);
		this.#wait();
	}

	stop(): void {
		this.#stopped = true;
		clearTimeout(this.#timer);
	}

	#wait(): void {
		if (this.#stopped || this.#asked.size + this.#news.size === 0) return;
		this.#timer ??= setTimeout(() => void this.#tellNews(), pauseMs);
	}

	async #tellNews(): Promise<void> {
		const asked = [...this.#asked];
		this.#asked = new Set();
		try {
			if (asked.length > 0) {
				for (const author of await authorship.read(this.#noteId, asked)) this.#take(author);
			}
		} catch (error) {
			log().warn({ err: error, noteId: this.#noteId }, 'the authors of cells could not be read');
			for (const id of asked) this.#asked.add(id);
		}
		if (this.#news.size > 0 && !this.#stopped) this.#tell(encode([...this.#news.values()]));
		this.#news = new Map();
		this.#timer = undefined;
		this.#wait();
	}

	#take(author: Author): void {
		if (author.seq <= (this.#last.get(author.cellId)?.seq ?? 0)) return;
		this.#last.set(author.cellId, author);
		this.#news.set(author.cellId, author);
	}
}

function encode(authors: readonly Author[]): Uint8Array {
	const cells = Object.fromEntries(
		authors.map(({ cellId, personId, name, at }) => [
			cellId,
			{ personId, name, at: at.toISOString() },
		]),
	);
	return encodeJson('authors', { cells } satisfies Authors);
}
