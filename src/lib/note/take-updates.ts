import * as Y from 'yjs';

/**
 * Brings updates into a document, in their order and in one transaction. Throws where one cannot be read.
 *
 * Yjs looks at what waits for a missing edit again only once a client it waits for has got further. Edits that came out
 * of their order, as those of a page that has changed the process, can so wait for each other for good although all of
 * them are there: what still waits is offered once more, together, where it is not just what waited before.
 */
export function takeUpdates(doc: Y.Doc, updates: readonly Uint8Array[], origin: unknown): void {
	const before = doc.store.pendingStructs?.update;
	doc.transact(() => {
		for (const update of updates) Y.applyUpdate(doc, update, origin);
		let left = Infinity;
		for (
			let waiting = doc.store.pendingStructs;
			waiting && waiting.update !== before && waiting.update.length < left;
			waiting = doc.store.pendingStructs
		) {
			left = waiting.update.length;
			Y.applyUpdateV2(doc, waiting.update, origin);
		}
	}, origin);
}
