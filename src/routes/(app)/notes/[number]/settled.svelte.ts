import type { Evaluation } from '$lib/calc/results';

/** Figures that go on changing, as while somebody types, have settled when they stood still this long. */
const settledMs = 300;

/** Results as they were when they last stood still. */
export class Settled {
	#evaluation = $state.raw<Evaluation>() as Evaluation;
	#timer: ReturnType<typeof setTimeout> | undefined;

	constructor(first: Evaluation) {
		this.#evaluation = first;
	}

	get evaluation(): Evaluation {
		return this.#evaluation;
	}

	follow(next: Evaluation): void {
		clearTimeout(this.#timer);
		this.#timer = setTimeout(() => (this.#evaluation = next), settledMs);
	}

	end(): void {
		clearTimeout(this.#timer);
	}
}
