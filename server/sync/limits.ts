/** Edits a room keeps while the database does not take them; with more it asks its pages to come back later. */
export const maxUnsaved = { edits: 5000, bytes: 8 * 1024 * 1024 };

/** Bytes a slow page may leave unread: results are held back at the first, the socket is ended at the second. */
export const maxUnread = { results: 1024 * 1024, all: 32 * 1024 * 1024 };

/** Sockets one person may have open in a process. */
export const maxSockets = 64;

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
