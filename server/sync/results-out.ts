import { changesBetween } from '$lib/protocol/changes';
import { encodeText } from '$lib/protocol/messages';

/** Results ready to be sent, encoded once for all who get the same. */
export interface SentResults {
	whole: () => Uint8Array;
	/** Only what changed, for a page that has the results before these; absent where there were none. */
	changes?: () => Uint8Array;
}

/** The results of a room on their way out. */
export class ResultsOut {
	#last: (SentResults & { results: object }) | undefined;

	/** Newer results, for everybody. */
	next(results: object): SentResults {
		const before = this.#last?.results;
		const next = {
			results,
			whole: once(() => encodeText('results', JSON.stringify(results))),
			...(before && {
				changes: once(() => encodeText('changes', JSON.stringify(changesBetween(before, results)))),
			}),
		};
		return (this.#last = next);
	}

	/** The newest results again, for who has just come in. */
	again(results: object): SentResults {
		return this.#last ?? this.next(results);
	}
}

function once<T>(make: () => T): () => T {
	let made: { value: T } | undefined;
	return () => (made ??= { value: make() }).value;
}
