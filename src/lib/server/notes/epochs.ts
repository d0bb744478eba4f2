import { sql } from 'drizzle-orm';
import { db } from '../db/client';
import { note } from '../db/schema/notes';

/**
 * Begins a new life of every note: pages that hold a note's text of before load it anew instead of merging theirs, which
 * may hold edits that the restored database never had, or has under other numbers. Returns how many notes there are.
 */
export async function beginNewEpochs(): Promise<number> {
	const begun = await db()
		.update(note)
		.set({ epoch: sql`gen_random_uuid()` })
		.returning({ id: note.id });
	return begun.length;
}
