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

	/** Hears that updates which changed these cells are stored. */
	hear(cellIds: Iterable<string>): void {
		for (const id of cellIds) this.#asked.add(id);
		if (this.#asked.size > 0 && !this.#stopped) {
			this.#timer ??= setTimeout(() => void this.#read(), pauseMs);
		}
	}

	stop(): void {
		this.#stopped = true;
		clearTimeout(this.#timer);
	}

	async #read(): Promise<void> {
		const asked = this.#asked;
		this.#asked = new Set();
		let again: Iterable<string> = [];
		try {
			this.#take(await authorship.read(this.#noteId, [...asked]));
		} catch (error) {
			log().warn({ err: error, noteId: this.#noteId }, 'the authors of cells could not be read');
			again = asked;
		}
		this.#timer = undefined;
		this.hear([...again, ...this.#asked]);
	}

	#take(found: readonly Author[]): void {
		const news = found.filter(({ cellId, seq }) => seq > (this.#last.get(cellId)?.seq ?? 0));
		for (const author of news) this.#last.set(author.cellId, author);
		if (news.length > 0 && !this.#stopped) this.#tell(encode(news));
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
