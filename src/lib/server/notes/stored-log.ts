import { AppError } from '$lib/errors';
import { takeUpdates } from '$lib/note/take-updates';
import { and, desc, eq, gt, lte, sql } from 'drizzle-orm';
import * as Y from 'yjs';
import type { Connection } from '../db/client';
import { noteSnapshot, noteUpdate } from '../db/schema/notes';

/** Updates of a note that lie one behind the other in a single value, which is read far faster than as many rows. */
const packed = sql<Buffer | null>`string_agg(int4send(octet_length(${noteUpdate.bytes})) || ${noteUpdate.bytes}, '' order by ${noteUpdate.seq})`;

/** First sequence number of what a row holds. */
export const startOf = sql<number>`coalesce(${noteUpdate.firstSeq}, ${noteUpdate.seq})`;

/** What a document is made of: a snapshot, where there is one, and the updates behind it. */
export interface StoredState {
	/** Number of the last update in it. */
	seq: number;
	snapshot: { seq: number; state: Uint8Array } | undefined;
	updates: Uint8Array[];
}

/**
 * The state at a sequence number. One inside a folded stretch gives that stretch's end. Throws AppError `unavailable`
 * where updates are missing: a document is never made of some of them. Call it in a transaction with one view of all.
 */
export async function readState(
	connection: Connection,
	noteId: string,
	wanted: number,
): Promise<StoredState> {
	const [snapshot] = await connection
		.select({ seq: noteSnapshot.seq, state: noteSnapshot.state })
		.from(noteSnapshot)
		.where(and(eq(noteSnapshot.noteId, noteId), lte(noteSnapshot.seq, wanted)))
		.orderBy(desc(noteSnapshot.seq))
		.limit(1);
	const after = snapshot?.seq ?? 0;
	const [log] = await connection
		.select({
			packed,
			edits: sql<number>`coalesce(sum(${noteUpdate.edits}), 0)::int`,
			last: sql<number>`coalesce(max(${noteUpdate.seq}), ${after})::int`,
		})
		.from(noteUpdate)
		.where(and(eq(noteUpdate.noteId, noteId), gt(noteUpdate.seq, after), lte(startOf, wanted)));
	const seq = log?.last ?? after;
	if (!log || log.edits !== seq - after || seq < wanted) {
		throw new AppError('unavailable', 'The note could not be read completely.', {
			details: { noteId, wanted, after, seq, edits: log?.edits },
		});
	}
	return { seq, snapshot, updates: unpack(log.packed) };
}

/** Makes a document of a stored state, in one Yjs transaction. Throws where an update cannot be read. */
export function documentOf({ snapshot, updates }: StoredState): Y.Doc {
	const doc = new Y.Doc();
	takeUpdates(doc, snapshot ? [snapshot.state, ...updates] : updates, 'database');
	return doc;
}

function unpack(bytes: Buffer | null): Uint8Array[] {
	const updates: Uint8Array[] = [];
	for (let at = 0; bytes && at < bytes.length;) {
		const length = bytes.readInt32BE(at);
		// A copy each: a wrong length inside one must not reach the next.
		updates.push(Uint8Array.from(bytes.subarray(at + 4, at + 4 + length)));
		at += 4 + length;
	}
	return updates;
}
