import type { Thread } from '$lib/schemas/comments';
import type { CommentChanges } from '$lib/schemas/comparison';
import { and, asc, eq, gt, lte, sql } from 'drizzle-orm';
import * as threads from '../comments/threads';
import { db } from '../db/client';
import { revision } from '../db/schema/review';
import type { KnownSide } from './sides';

/**
 * Comments of the time between two sides, whichever comes first. What a revision keeps of them is read from its review
 * record, so that it says what was so when it was frozen.
 */
export async function commentsBetween(
	noteId: string,
	one: KnownSide,
	other: KnownSide,
): Promise<CommentChanges> {
	const [earlier, later] = isBefore(one, other) ? [one, other] : [other, one];
	const since = earlier.at ?? new Date().toISOString();
	const until = later.at;
	const all =
		later.kind === 'revision' && until !== null
			? await recorded(noteId, since, until)
			: (await threads.read(db(), noteId)).map((thread) => upTo(thread, until));
	const between = (at: string) => at > since && (until === null || at <= until);
	const openedAt = (thread: Thread) => thread.comments[0]?.at ?? '';
	return {
		since,
		until,
		opened: all.filter((thread) => between(openedAt(thread))),
		closed: all.filter(({ closed }) => closed && between(closed.at)),
		left: all.filter(
			(thread) => openedAt(thread) !== '' && openedAt(thread) <= since && !thread.closed,
		),
	};
}

function isBefore(one: KnownSide, other: KnownSide): boolean {
	return one.at !== null && (other.at === null || one.at <= other.at);
}

/** A thread as it was then; it has no comments where it was opened later. */
function upTo(thread: Thread, until: string | null): Thread {
	if (until === null) return thread;
	return {
		...thread,
		closed: thread.closed && thread.closed.at <= until ? thread.closed : null,
		comments: thread.comments.filter(({ at }) => at <= until),
	};
}

/** The review records of the revisions that were frozen in a time, as one; the newest word on a thread counts. */
async function recorded(noteId: string, since: string, until: string): Promise<Thread[]> {
	const rows = await db()
		.select({ review: sql<Thread[] | null>`${revision.canonical}::json -> 'review'` })
		.from(revision)
		.where(
			and(
				eq(revision.noteId, noteId),
				gt(revision.frozenAt, new Date(since)),
				lte(revision.frozenAt, new Date(until)),
			),
		)
		.orderBy(asc(revision.frozenAt));
	const found = new Map<string, Thread>();
	for (const { review } of rows) for (const thread of review ?? []) found.set(thread.id, thread);
	return [...found.values()];
}
