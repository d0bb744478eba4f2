import type { Evaluation } from '$lib/calc/results';
import type { NoteContent } from '$lib/note/document';

/** What goes on changing, as while somebody types, has settled when it stood still this long. */
const settledMs = 600;

interface State extends NoteContent {
	evaluation: Evaluation;
}

/** The note as it was when it last stood still, for what need not follow each key. */
export class Settled {
	#state = $state.raw<State>() as State;
	#timer: ReturnType<typeof setTimeout> | undefined;

	constructor(first: State) {
		this.#state = first;
	}

	get evaluation(): Evaluation {
		return this.#state.evaluation;
	}

	get content(): NoteContent {
		return this.#state;
	}

	follow(next: State): void {
		clearTimeout(this.#timer);
		this.#timer = setTimeout(() => (this.#state = next), settledMs);
	}

	end(): void {
		clearTimeout(this.#timer);
	}
}
