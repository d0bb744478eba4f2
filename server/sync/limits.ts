/** Edits a room keeps while the database does not take them; with more it asks its pages to come back later. */
export const maxUnsaved = { edits: 5000, bytes: 8 * 1024 * 1024 };

/** Bytes a slow page may leave unread: results are held back at the first, the socket is ended at the second. */
export const maxUnread = { results: 1024 * 1024, all: 4 * 1024 * 1024 };

/** Bytes of a document, written down whole. */
export const maxDocumentBytes = 24 * 1024 * 1024;

/** Bytes of a note's updates that wait for others. */
export const maxPendingBytes = 2 * 1024 * 1024;

/** Sockets open in a process: of one person, and of one note. */
export const maxSockets = { ofPerson: 64, ofNote: 300 };

/** What a page may say of itself: bytes, and clients in one message. */
export const maxPresence = { bytes: 4096, clients: 16 };

/** Messages a page may send: so many at once, and so many a second in the long run. */
const messages = { burst: 1000, perSecond: 200 };
const bytes = { burst: 8 * 1024 * 1024, perSecond: 2 * 1024 * 1024 };

/** Counts what a page sends; false once it is too much. */
export class Allowance {
	#messages: number = messages.burst;
	#bytes: number = bytes.burst;
	#at = performance.now();

	take(length: number): boolean {
		const now = performance.now();
		const seconds = (now - this.#at) / 1000;
		this.#at = now;
		this.#messages = Math.min(messages.burst, this.#messages + seconds * messages.perSecond) - 1;
		this.#bytes = Math.min(bytes.burst, this.#bytes + seconds * bytes.perSecond) - length;
		return this.#messages >= 0 && this.#bytes >= 0;
	}
}
