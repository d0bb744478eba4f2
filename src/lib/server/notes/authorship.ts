import { and, eq, inArray, sql } from 'drizzle-orm';
import { db, type Connection } from '../db/client';
import { cellAuthor } from '../db/schema/notes';
import { person } from '../db/schema/people';
import type { Edit } from './updates';

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

/** Keeps who wrote last in the cells of edits that are being stored; the first of them has the number `first`. */
export async function record(
	connection: Connection,
	noteId: string,
	{ edits, first, at }: { edits: readonly Edit[]; first: number; at: Date },
): Promise<void> {
	const last = new Map<string, CellAuthor>();
	edits.forEach(({ cells, personId, completed = [] }, index) => {
		const write = (cellId: string, by: string) =>
			last.set(cellId, { cellId, personId: by, seq: first + index, at });
		for (const cellId of cells) write(cellId, personId);
		for (const other of completed) {
			for (const cellId of other.cells) write(cellId, other.personId);
		}
	});
	const authors = [...last.values()];
	if (authors.length === 0) return;
	await connection
		.insert(cellAuthor)
		.values(authors.map((author) => ({ noteId, ...author })))
		.onConflictDoUpdate({
			target: [cellAuthor.noteId, cellAuthor.cellId],
			set: {
				personId: sql`excluded.person_id`,
				seq: sql`excluded.seq`,
				at: sql`excluded.at`,
			},
		});
}
