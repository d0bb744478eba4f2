import { and, desc, eq, lt, notInArray, sql } from 'drizzle-orm';
import { db } from '../db/client';
import { note, noteSnapshot } from '../db/schema/notes';

/** Updates behind a snapshot that make a new one worth its while. */
export const snapshotEvery = 500;

/** Snapshots that a note keeps; the newest is loaded from. */
const kept = 2;

/**
 * Keeps a document's whole state at a sequence number, and lets older ones go. The state must be that of the updates
 * up to there and no others, and none of them may be waiting for another.
 */
export async function write(noteId: string, seq: number, state: Uint8Array): Promise<void> {
	await db().transaction(async (tx) => {
		const [head] = await tx.select({ seq: note.seq }).from(note).where(eq(note.id, noteId));
		if (!head || head.seq < seq) throw new Error(`no update ${seq} to make a snapshot of`);
		await tx.insert(noteSnapshot).values({ noteId, seq, state }).onConflictDoNothing();
		const newest = tx
			.select({ seq: noteSnapshot.seq })
			.from(noteSnapshot)
			.where(eq(noteSnapshot.noteId, noteId))
			.orderBy(desc(noteSnapshot.seq))
			.limit(kept);
		await tx
			.delete(noteSnapshot)
			.where(
				and(
					eq(noteSnapshot.noteId, noteId),
					lt(noteSnapshot.seq, seq),
					notInArray(noteSnapshot.seq, newest),
				),
			);
	});
}

/** Sequence number of the newest snapshot; 0 where there is none. */
export async function newest(noteId: string): Promise<number> {
	const [found] = await db()
		.select({ seq: sql<number>`coalesce(max(${noteSnapshot.seq}), 0)::int` })
		.from(noteSnapshot)
		.where(eq(noteSnapshot.noteId, noteId));
	return found?.seq ?? 0;
}
