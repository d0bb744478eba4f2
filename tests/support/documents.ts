import * as Y from 'yjs';
import { seedContent } from '$lib/note/document';

/** A note's document with calculation cells of these sources. */
export function noteOf(...sources: string[]): Y.Doc {
	const doc = new Y.Doc();
	seedContent(doc, {
		title: 'Divider',
		cells: sources.map((source) => ({ kind: 'calculation', source })),
	});
	return doc;
}

/** A document of its own with the same content. */
export function replicaOf(doc: Y.Doc): Y.Doc {
	const replica = new Y.Doc();
	Y.applyUpdate(replica, Y.encodeStateAsUpdate(doc));
	return replica;
}
