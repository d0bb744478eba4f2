import type { Thread } from '$lib/schemas/comments';
import type { Connection } from '../db/client';
import * as threads from '../comments/threads';

/** The comments that a revision keeps: everything said since the revision before it, and what was open then. */
export async function reviewRecord(
	connection: Connection,
	noteId: string,
	since: Date | undefined,
): Promise<Thread[]> {
	const all = await threads.read(connection, noteId);
	const from = since?.toISOString() ?? '';
	return all.filter(
		({ closed, comments }) => !closed || closed.at > from || comments.some(({ at }) => at > from),
	);
}
