import { cellsOf, titleOf } from '$lib/note/document';
import { shownOf } from '$lib/note/shown';
import * as Y from 'yjs';

/** Changes within this time of each other, typing above all, are undone together. */
const captureMs = 500;

/** Undoes a document's changes that carry this origin; editors add theirs to its tracked origins. */
export function undoManagerOf(doc: Y.Doc, origin: unknown): Y.UndoManager {
	const parts = [titleOf(doc), cellsOf(doc), shownOf(doc)] as Y.AbstractType<unknown>[];
	return new Y.UndoManager(parts, {
		trackedOrigins: new Set([origin]),
		captureTimeout: captureMs,
	});
}
