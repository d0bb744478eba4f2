import type { NoteState } from '$lib/schemas/notes';
import { and, desc, eq, ne, or, sql } from 'drizzle-orm';
import type { Actor } from '../auth/access';
import { db } from '../db/client';
import { noteStanding } from '../db/schema/listing';
import { evaluation, note } from '../db/schema/notes';
import { team } from '../db/schema/people';
import { formatNumber } from '../notes/number';

/** A note that may hold something for a person. */
export interface DeskNote {
	id: string;
	/** MN-014 */
	number: string;
	title: string;
	state: NoteState;
	/** Whether the person began it or wrote in it. */
	isMine: boolean;
	/** Requirements of the working copy that are not met. */
	notMet: number;
}

/** Notes of the actor's team that are under review, or that the actor works on; not those that are frozen as they are. */
export async function notesOf(actor: Actor): Promise<DeskNote[]> {
	const isMine = sql<boolean>`(${note.createdBy} = ${actor.personId} or exists (
		select from cell_author a where a.note_id = ${note.id} and a.person_id = ${actor.personId}))`;
	const rows = await db()
		.select({
			id: note.id,
			number: note.number,
			prefix: team.notePrefix,
			title: note.title,
			state: noteStanding.state,
			isMine,
			notMet: sql<number>`coalesce(${evaluation.notMet}, 0)`,
		})
		.from(note)
		.innerJoin(team, eq(team.id, note.teamId))
		.innerJoin(noteStanding, eq(noteStanding.noteId, note.id))
		.leftJoin(evaluation, eq(evaluation.noteId, note.id))
		.where(
			and(
				eq(note.teamId, actor.teamId),
				ne(noteStanding.state, 'frozen'),
				ne(noteStanding.state, 'withdrawn'),
				or(ne(noteStanding.state, 'draft'), isMine),
			),
		)
		.orderBy(desc(note.changedAt))
		.limit(500);
	return rows.map(({ prefix, number, ...row }) => ({
		...row,
		number: formatNumber(prefix, number),
	}));
}
