import { placedCells } from '$lib/note/document';
import type { Actor } from '$lib/server/auth/access';
import { current } from '$lib/server/evaluation/store';
import * as updates from '$lib/server/notes/updates';
import * as Y from 'yjs';

interface Replacement {
	/** Place of the cell on its sheet, from 0. */
	cell: number;
	from: string;
	to: string;
}

/** Replaces text in a note's cells as an edit of the author, and computes the note anew. */
export async function rewrite(
	noteId: string,
	author: Actor,
	replacements: readonly Replacement[],
): Promise<void> {
	const { doc } = await updates.loadDocument(noteId);
	const before = Y.encodeStateVector(doc);
	const cells = placedCells(doc);
	for (const { cell, from, to } of replacements) {
		const text = cells[cell]?.text;
		const at = text?.toJSON().indexOf(from) ?? -1;
		if (!text || at < 0) throw new Error(`cell ${cell} does not hold "${from}"`);
		text.delete(at, from.length);
		text.insert(at, to);
	}
	const bytes = Y.encodeStateAsUpdate(doc, before);
	await updates.append(noteId, [{ id: crypto.randomUUID(), personId: author.personId, bytes }]);
	await current(noteId);
}
