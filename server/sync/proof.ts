import { strangenessOf } from '$lib/note/shape';
import { takeUpdates } from '$lib/note/take-updates';
import * as Y from 'yjs';
import { maxDocumentBytes, maxPendingBytes } from './limits';
import { bringsFrom, contradicts } from './restated';

/** What is found out about an update before the document takes it. */
export type Finding =
	/** `clients`: the client ids under which it brings something new. */
	| { kind: 'good'; clients: number[] }
	| { kind: 'refused'; reason: string }
	/** It would hold back more than may wait for what it depends on. */
	| { kind: 'tooMuchPending' }
	/** The note would be larger than notes may be. */
	| { kind: 'tooLarge' }
	/** It cannot be read. */
	| { kind: 'broken' };

/** Time without updates after which the copy is given up. */
const idleMs = 20_000;

/**
 * Tries every update on a second copy of the document first, so that a broken one never half-applies to the document
 * itself, and one that may not be is never in it. The copy lives while people write.
 */
export class Proof {
	readonly #doc: Y.Doc;
	/** About how large the document is when it is written down. */
	#bytes = 0;
	#copy: Y.Doc | undefined;
	#strange: string | undefined;
	#timer: NodeJS.Timeout | undefined;
	#usedAt = 0;

	constructor(doc: Y.Doc) {
		this.#doc = doc;
	}

	/** Whether the document can take what is stored already. */
	passes(update: Uint8Array): boolean {
		return this.#apply(update);
	}

	/** Judges an edit of a person, by whose client ids the `owners` are. */
	judge(
		update: Uint8Array,
		personId: string,
		owners: (clientId: number) => string | undefined,
	): Finding {
		const structs = decode(update);
		if (!structs) return { kind: 'broken' };
		this.#use();
		const room = maxDocumentBytes - update.length;
		if (this.#bytes > room && this.#weigh() > room) return { kind: 'tooLarge' };
		const clients = [...bringsFrom(this.#doc, structs)];
		if (clients.some((id) => (owners(id) ?? personId) !== personId)) {
			return refused('It was written under the name of somebody else’s page.');
		}
		if (contradicts(this.#doc, structs)) {
			return refused('It says something else than what this page wrote before.');
		}
		const wasPending = isPending(this.#doc);
		if (!this.#apply(update)) return { kind: 'broken' };
		// What an edit completes may be another page's, which was let in before it could be looked at.
		if (this.#strange && !wasPending) {
			this.#drop();
			return refused(`It holds what no note has: ${this.#strange}.`);
		}
		if (pendingBytes(this.#copy) > maxPendingBytes) {
			this.#drop();
			return { kind: 'tooMuchPending' };
		}
		this.#bytes += update.length;
		return { kind: 'good', clients };
	}

	stop(): void {
		this.#drop();
	}

	#apply(update: Uint8Array): boolean {
		this.#strange = undefined;
		try {
			takeUpdates(this.#use(), [update], 'proof');
			return true;
		} catch {
			this.#drop();
			return false;
		}
	}

	#use(): Y.Doc {
		this.#usedAt = performance.now();
		if (this.#copy) return this.#copy;
		const state = Y.encodeStateAsUpdate(this.#doc);
		this.#bytes = state.length;
		const copy = new Y.Doc();
		takeUpdates(copy, [state], 'proof');
		copy.on('afterTransaction', (transaction) => (this.#strange ??= strangenessOf(transaction)));
		this.#timer = setInterval(() => {
			if (performance.now() - this.#usedAt > idleMs) this.#drop();
		}, idleMs).unref();
		return (this.#copy = copy);
	}

	#drop(): void {
		clearInterval(this.#timer);
		this.#copy?.destroy();
		this.#copy = undefined;
	}

	/** Updates add up to more than they leave behind, so that a large document is weighed before it counts as full. */
	#weigh(): number {
		return (this.#bytes = Y.encodeStateAsUpdate(this.#doc).length);
	}
}

function refused(reason: string): Finding {
	return { kind: 'refused', reason: `This change is not taken. ${reason}` };
}

function decode(update: Uint8Array) {
	try {
		return Y.decodeUpdate(update).structs;
	} catch {
		return undefined;
	}
}

function isPending({ store }: Y.Doc): boolean {
	return store.pendingStructs !== null || store.pendingDs !== null;
}

function pendingBytes(doc: Y.Doc | undefined): number {
	const { pendingStructs, pendingDs } = doc?.store ?? {};
	return (pendingStructs?.update.length ?? 0) + (pendingDs?.length ?? 0);
}
