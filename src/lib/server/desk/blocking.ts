import type { Waiting } from '$lib/schemas/desk';
import { and, asc, eq, inArray, isNull } from 'drizzle-orm';
import { db } from '../db/client';
import { comment, thread } from '../db/schema/notes';
import { person } from '../db/schema/people';
import type { DeskNote } from './desk-notes';
import { shortened } from './shortened';

/** Open comments that block the freezing of these notes, each with who opened it and its first words. */
export async function blockingOf(notes: readonly DeskNote[]): Promise<Waiting[]> {
	if (notes.length === 0) return [];
	const rows = await db()
		.selectDistinctOn([thread.id], {
			id: thread.id,
			noteId: thread.noteId,
			cellId: thread.cellId,
			name: person.name,
			body: comment.body,
			at: comment.at,
		})
		.from(thread)
		.innerJoin(comment, eq(comment.threadId, thread.id))
		.innerJoin(person, eq(person.id, comment.personId))
		.where(
			and(
				inArray(
					thread.noteId,
					notes.map(({ id }) => id),
				),
				eq(thread.blocking, true),
				isNull(thread.closedAt),
			),
		)
		.orderBy(thread.id, asc(comment.at));
	return rows
		.sort((a, b) => a.at.getTime() - b.at.getTime())
		.flatMap(({ noteId, cellId, name, body }) => {
			const note = notes.find(({ id }) => id === noteId);
			if (!note) return [];
			return [
				{
					number: note.number,
					title: note.title,
					href: `/notes/${note.number}#cell-${cellId}`,
					what: `${name}: ${shortened(body)}`,
					due: null,
					isLate: false,
				},
			];
		});
}
