import * as Y from 'yjs';

/**
 * What a document's own client has written from `clock` on, as an update. Yjs puts what waits for a missing edit into
 * every update it makes of a document; that is somebody else's, and under another name it would be refused.
 */
export function ownChanges(doc: Y.Doc, clock: number): Uint8Array {
	const known = Y.decodeStateVector(Y.encodeStateVector(doc));
	const waiting = doc.store.pendingStructs?.update;
	if (waiting) for (const [client, to] of Y.parseUpdateMetaV2(waiting).to) known.set(client, to);
	known.set(doc.clientID, clock);
	return Y.encodeStateAsUpdate(doc, Y.encodeStateVector(known));
}
