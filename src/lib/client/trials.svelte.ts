import type { MonteCarlo, Quantity } from '$lib/calc/results';
import type { TrialsLine } from '$lib/schemas/quantities';
import { callForLines } from './call';

interface Progress {
	drawn: number;
	total: number;
}

/** Trials of one quantity, drawn by the server while the page shows how far they are. */
export class Trials {
	readonly #address: string;
	#run: AbortController | undefined;
	#progress = $state.raw<Progress>();
	#result = $state.raw<Quantity & { monteCarlo: MonteCarlo }>();
	#failure = $state<string>();

	constructor(address: string) {
		this.#address = address;
	}

	/** How far they are; undefined while none are drawn. */
	get progress(): Progress | undefined {
		return this.#progress;
	}
	/** What the last run gave. */
	get result(): (Quantity & { monteCarlo: MonteCarlo }) | undefined {
		return this.#result;
	}
	/** Why the last run gave nothing, a sentence. */
	get failure(): string | undefined {
		return this.#failure;
	}

	async start(quantity: string, adaptive: boolean): Promise<void> {
		this.forget();
		const run = (this.#run = new AbortController());
		this.#progress = { drawn: 0, total: 0 };
		try {
			const wish = { quantity, adaptive };
			for await (const line of callForLines<TrialsLine>(this.#address, wish, run.signal)) {
				if (this.#run !== run) return;
				if ('message' in line) this.#failure = line.message;
				else if ('drawn' in line) this.#progress = line;
				else this.#result = line.quantity;
			}
		} catch (error) {
			if (this.#run === run && !run.signal.aborted) this.#failure = (error as Error).message;
		}
		if (this.#run === run) this.#progress = undefined;
	}

	/** Ends the run; the server stops drawing. */
	stop(): void {
		this.#run?.abort();
		this.#run = undefined;
		this.#progress = undefined;
	}

	/** Ends the run and drops what was found. */
	forget(): void {
		this.stop();
		this.#result = undefined;
		this.#failure = undefined;
	}
}
