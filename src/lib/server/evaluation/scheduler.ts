import type { Evaluation } from '$lib/calc/results';
import type { NoteContent } from '$lib/note/document';
import { log } from '../log';
import { optionsOf } from './note-options';
import { evaluateInChild } from './pool';

/** What a document held at a version of it, with the results of that. */
export interface Evaluated {
	version: number;
	content: NoteContent;
	results: Evaluation;
}

const pauseMs = { first: 200, longest: 5000 };

/** Keeps a document's results up to date: one evaluation in flight, the newest state next, none in between. */
export class Scheduler {
	readonly #read: () => { version: number; content: NoteContent };
	readonly #onResults: (evaluated: Evaluated) => void;
	readonly #note: string;
	readonly #compute: typeof evaluateInChild;
	#running: Promise<void> | undefined;
	#wanted = false;
	#stopped = false;
	#last: Evaluated | undefined;
	#again: NodeJS.Timeout | undefined;
	#pauseMs = pauseMs.first;

	constructor(
		read: () => { version: number; content: NoteContent },
		onResults: (evaluated: Evaluated) => void,
		note: string,
		compute = evaluateInChild,
	) {
		this.#note = note;
		this.#compute = compute;
		this.#read = read;
		this.#onResults = onResults;
	}

	/** The newest results. */
	get last(): Evaluated | undefined {
		return this.#last;
	}

	/** Takes results that are known already. */
	adopt(evaluated: Evaluated): void {
		this.#last = evaluated;
	}

	/** Asks for results of the document as it is now, or will be when the evaluation in flight has ended. */
	request(): void {
		this.#wanted = true;
		this.#running ??= this.#run();
	}

	/** Settles when no evaluation is in flight or wanted. */
	async idle(): Promise<void> {
		await this.#running;
	}

	stop(): void {
		this.#stopped = true;
		clearTimeout(this.#again);
	}

	async #run(): Promise<void> {
		// One turn later, so that the changes of one message make one evaluation.
		await Promise.resolve();
		while (this.#wanted && !this.#stopped) {
			this.#wanted = false;
			const { version, content } = this.#read();
			try {
				const results = await this.#evaluate(content);
				this.#last = { version, content, results };
				this.#pauseMs = pauseMs.first;
				clearTimeout(this.#again);
				this.#onResults(this.#last);
			} catch (error) {
				log().error({ err: error }, 'an evaluation failed');
				this.#tryAgain();
			}
		}
		this.#running = undefined;
	}

	/** Pages would show old figures until somebody types, so it is tried again, with growing pauses. */
	#tryAgain(): void {
		if (this.#stopped) return;
		clearTimeout(this.#again);
		this.#again = setTimeout(() => this.request(), this.#pauseMs).unref();
		this.#pauseMs = Math.min(this.#pauseMs * 2, pauseMs.longest);
	}

	async #evaluate(content: NoteContent): Promise<Evaluation> {
		const last = this.#last;
		// A change of the title, or one that was taken back, changes no result.
		if (last && JSON.stringify(computedOf(last.content)) === JSON.stringify(computedOf(content))) {
			return last.results;
		}
		const circumstances = { note: this.#note, last: last?.results };
		return this.#compute(content.cells, optionsOf(content), circumstances);
	}
}

/** What of a note its results depend on. */
function computedOf({ cells, shown }: NoteContent) {
	return { cells, shown };
}
