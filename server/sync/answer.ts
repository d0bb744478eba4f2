import { countParts, encodePart, maxPartBytes } from '$lib/protocol/parts';
import * as outgoing from './outgoing';

/** Parts that are sent before the page has said that an earlier one has come. */
const ahead = 2;

/** What a page lacked when it asked, on its way to it: at once where it is short, else part by part as they are read. */
export class Answer {
	readonly #send: (message: Uint8Array) => void;
	#number = 0;
	#bytes: Uint8Array | undefined;
	#next = 0;

	constructor(send: (message: Uint8Array) => void) {
		this.#send = send;
	}

	/** Whether parts of the last one are still to come; a page that asks again meanwhile will have them. */
	get isUnderWay(): boolean {
		return this.#bytes !== undefined;
	}

	start(bytes: Uint8Array): void {
		if (bytes.length <= maxPartBytes) {
			this.#send(outgoing.whole(bytes));
			return;
		}
		this.#bytes = bytes;
		this.#number += 1;
		this.#next = 0;
		this.#sendUpTo(ahead);
	}

	/** The page has a part. */
	onRead({ answer, index }: { answer: number; index: number }): void {
		if (answer === this.#number && index < this.#next) this.#sendUpTo(index + 1 + ahead);
	}

	#sendUpTo(end: number): void {
		const bytes = this.#bytes;
		if (!bytes) return;
		const count = countParts(bytes);
		for (; this.#next < Math.min(end, count); this.#next += 1) {
			this.#send(encodePart(this.#number, bytes, this.#next));
		}
		if (this.#next === count) this.#bytes = undefined;
	}
}
