/** Longest time in ms that a change waits for its figures. */
const longest = 15;
/** Pages of a note up to which changes wait. */
const few = 3;

/**
 * Changes on their way to the other pages. Among few pages they wait for the few milliseconds that their figures take,
 * so that a page gets both at once and is laid out once; in a crowd nothing waits.
 */
export class HeldUpdates {
	readonly #send: (message: Uint8Array, origin: unknown) => void;
	readonly #held: { message: Uint8Array; origin: unknown }[] = [];
	#timer: NodeJS.Timeout | undefined;

	constructor(send: (message: Uint8Array, origin: unknown) => void) {
		this.#send = send;
	}

	add(message: Uint8Array, origin: unknown, pages: number): void {
		this.#held.push({ message, origin });
		if (pages > few) this.release();
		else this.#timer ??= setTimeout(() => this.release(), longest);
	}

	/** Sends what waits, in its order. */
	release(): void {
		clearTimeout(this.#timer);
		this.#timer = undefined;
		for (const { message, origin } of this.#held.splice(0)) this.#send(message, origin);
	}
}
