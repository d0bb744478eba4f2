import { mergeUpdates } from 'yjs';

/** Edits sent and not yet acknowledged at one time; what is made meanwhile goes together as the next. */
const window = 64;
/** Bytes up to which small edits are put together. */
const maxMergedBytes = 256 * 1024;

interface Sealed {
	id: string;
	update: Uint8Array;
	sent: boolean;
}

/**
 * Local edits until the server says that they are stored. An edit that was sent keeps its id and bytes, so
 * that sending it again is harmless; those not yet sent are put together.
 */
export class Outbox {
	readonly #sealed = new Map<string, Sealed>();
	#loose: Uint8Array[] = [];

	/** Edits that are not acknowledged. */
	get count(): number {
		return this.#sealed.size + this.#loose.length;
	}

	add(update: Uint8Array): void {
		this.#loose.push(update);
	}

	/** What to send now, in order; it counts as sent from here on. */
	take(): { id: string; update: Uint8Array }[] {
		while (this.#loose.length > 0 && this.#sealed.size < window) this.#seal();
		const unsent = [...this.#sealed.values()].filter((edit) => !edit.sent);
		for (const edit of unsent) edit.sent = true;
		return unsent;
	}

	/** The connection broke: whatever was sent and not acknowledged is to be sent again. */
	reset(): void {
		for (const edit of this.#sealed.values()) edit.sent = false;
	}

	/** Forgets edits that are stored, or never will be. */
	settle(ids: readonly string[]): void {
		for (const id of ids) this.#sealed.delete(id);
	}

	#seal(): void {
		let bytes = 0;
		let end = 0;
		for (const update of this.#loose) {
			bytes += update.length;
			if (end > 0 && bytes > maxMergedBytes) break;
			end += 1;
		}
		const [first, ...rest] = this.#loose.splice(0, end);
		if (!first) return;
		const id = newEditId();
		const update = rest.length > 0 ? mergeUpdates([first, ...rest]) : first;
		this.#sealed.set(id, { id, update, sent: false });
	}
}

/** 96 random bits, hexadecimal. */
function newEditId(): string {
	const bytes = crypto.getRandomValues(new Uint8Array(12));
	return Array.from(bytes, (byte) => byte.toString(16).padStart(2, '0')).join('');
}
