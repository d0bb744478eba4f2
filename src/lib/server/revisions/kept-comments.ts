import type { Thread } from '$lib/schemas/comments';
import { and, eq, sql } from 'drizzle-orm';
import { demand, type Actor } from '../auth/access';
import { db } from '../db/client';
import { revision } from '../db/schema/review';
import * as notes from '../notes/notes';

/** The comments that a frozen revision keeps as its review record; none of one that was frozen before there was any. */
export async function keptComments(
	actor: Actor,
	number: string,
	letter: string,
): Promise<Thread[]> {
	demand(actor, 'readFrozen');
	const { id } = await notes.get(actor, number);
	const [found] = await db()
		.select({ review: sql<Thread[] | null>`${revision.canonical}::json -> 'review'` })
		.from(revision)
		.where(and(eq(revision.noteId, id), eq(revision.letter, letter)));
	return found?.review ?? [];
}
