import type { Waiting } from '$lib/schemas/desk';
import { and, eq, inArray, isNull } from 'drizzle-orm';
import * as threads from '../comments/threads';
import { db } from '../db/client';
import { thread } from '../db/schema/notes';
import type { DeskNote } from './desk-notes';
import { shortened } from './shortened';

/** Comments that block the freezing of these notes and are not closed, each with who opened it and its first words. */
export async function blockingOf(notes: readonly DeskNote[]): Promise<Waiting[]> {
	if (notes.length === 0) return [];
	const ids = notes.map(({ id }) => id);
	const blocked = await db()
		.selectDistinct({ noteId: thread.noteId })
		.from(thread)
		.where(and(inArray(thread.noteId, ids), eq(thread.blocking, true), isNull(thread.closedAt)));
	const waiting: Waiting[] = [];
	for (const { id, number, title } of notes) {
		if (!blocked.some(({ noteId }) => noteId === id)) continue;
		for (const { cellId, blocking, closed, comments } of await threads.read(db(), id)) {
			const [first] = comments;
			if (!blocking || closed || !first) continue;
			waiting.push({
				...{ number, title },
				href: `/notes/${number}#cell-${cellId}`,
				what: `${first.person.name}: ${shortened(first.body)}`,
				due: null,
				isLate: false,
			});
		}
	}
	return waiting;
}
