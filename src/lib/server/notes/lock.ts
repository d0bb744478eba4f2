import { eq } from 'drizzle-orm';
import type { Connection } from '../db/client';
import { note } from '../db/schema/notes';

/** Holds the note's row until the transaction ends: whatever decides about a note, or stands in the way of it, waits its turn. */
export async function lock(connection: Connection, noteId: string): Promise<void> {
	await connection.select({ id: note.id }).from(note).where(eq(note.id, noteId)).for('update');
}
