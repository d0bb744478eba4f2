import * as Y from 'yjs';

/**
 * A second copy of a document on which every update is tried first, so that a broken one never half-applies
 * to the document itself.
 */
export class Proof {
	readonly #doc: Y.Doc;
	#copy: Y.Doc;

	constructor(doc: Y.Doc) {
		this.#doc = doc;
		this.#copy = copyOf(doc);
	}

	/** Whether the document can take the update. */
	passes(update: Uint8Array): boolean {
		try {
			Y.applyUpdate(this.#copy, update);
			return true;
		} catch {
			this.#copy.destroy();
			this.#copy = copyOf(this.#doc);
			return false;
		}
	}
}

function copyOf(doc: Y.Doc): Y.Doc {
	const copy = new Y.Doc();
	Y.applyUpdate(copy, Y.encodeStateAsUpdate(doc));
	return copy;
}
