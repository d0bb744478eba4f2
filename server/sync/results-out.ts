import { encodeText } from '$lib/protocol/messages';
import { ResultsText } from './results-text';

/** Results ready to be sent, encoded once for all who get the same. */
export interface SentResults {
	whole: () => Uint8Array;
	/** Only what changed, for a page that has the results before these; absent where there were none. */
	changes?: () => Uint8Array;
}

/** The results of a room on their way out. */
export class ResultsOut {
	#text: ResultsText | undefined;

	/** Newer results, for everybody. */
	next(results: object): SentResults {
		const before = this.#text;
		const now = (this.#text = new ResultsText(results));
		return {
			whole: once(() => encodeText('results', now.whole())),
			...(before && { changes: once(() => encodeText('changes', now.since(before))) }),
		};
	}

	/** The newest results again, for who has just come in. */
	again(results: object): SentResults {
		const now = (this.#text ??= new ResultsText(results));
		return { whole: () => encodeText('results', now.whole()) };
	}
}

function once<T>(make: () => T): () => T {
	let made: { value: T } | undefined;
	return () => (made ??= { value: make() }).value;
}
