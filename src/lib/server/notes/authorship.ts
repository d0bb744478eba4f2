import { and, eq, inArray } from 'drizzle-orm';
import { db } from '../db/client';
import { cellAuthor } from '../db/schema/notes';
import { person } from '../db/schema/people';
import type { Edit } from './append';

/** Who wrote last in a cell, by which update. */
export interface CellAuthor {
	cellId: string;
	personId: string;
	seq: number;
	at: Date;
}

/** Who wrote last in each cell of a note, or in some of them, with their names. Cells that are gone are among them. */
export async function read(
	noteId: string,
	cellIds?: readonly string[],
): Promise<(CellAuthor & { name: string })[]> {
	return db()
		.select({
			cellId: cellAuthor.cellId,
			personId: cellAuthor.personId,
			seq: cellAuthor.seq,
			at: cellAuthor.at,
			name: person.name,
		})
		.from(cellAuthor)
		.innerJoin(person, eq(person.id, cellAuthor.personId))
		.where(and(eq(cellAuthor.noteId, noteId), cellIds && inArray(cellAuthor.cellId, [...cellIds])));
}

/** Who wrote last in the cells of edits that are being stored; the first of them has the number `first`. */
export function lastIn(
	edits: readonly Edit[],
	first: number,
): { cellId: string; personId: string; seq: number }[] {
	const last = new Map<string, { cellId: string; personId: string; seq: number }>();
	edits.forEach(({ cells, personId, completed = [] }, index) => {
		const write = (cellId: string, by: string) =>
			last.set(cellId, { cellId, personId: by, seq: first + index });
		for (const cellId of cells) write(cellId, personId);
		for (const other of completed) {
			for (const cellId of other.cells) write(cellId, other.personId);
		}
	});
	return [...last.values()];
}
