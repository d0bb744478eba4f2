import { placedCells } from '$lib/note/document';
import type { Actor } from '$lib/server/auth/access';
import { current } from '$lib/server/evaluation/store';
import * as updates from '$lib/server/notes/updates';

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
	await updates.change(noteId, author.personId, (doc) => {
		const cells = placedCells(doc);
		for (const { cell, from, to } of replacements) {
			const text = cells[cell]?.text;
			const at = text?.toJSON().indexOf(from) ?? -1;
			if (!text || at < 0) throw new Error(`cell ${cell} does not hold "${from}"`);
			text.delete(at, from.length);
			text.insert(at, to);
		}
	});
	await current(noteId);
}
