import { AppError } from '$lib/errors';
import type { NoteContent } from '$lib/note/document';
import type { NoteState } from '$lib/schemas/notes';
import { may } from '$lib/schemas/role';
import { and, eq, sql } from 'drizzle-orm';
import * as audit from '../audit/audit';
import { demand, type Actor } from '../auth/access';
import { db } from '../db/client';
import { noteStanding } from '../db/schema/listing';
import { note } from '../db/schema/notes';
import { team } from '../db/schema/people';
import { formatNumber, parseNumber } from './number';
import * as updates from './updates';

/** A note's identity and the state of its working copy. */
export interface NoteHead {
	id: string;
	/** MN-014 */
	number: string;
	title: string;
	epoch: string;
	/** ISO 8601 */
	changedAt: string;
	seq: number;
	state: NoteState;
	/** Letter of the last frozen revision. */
	revision: string | null;
}

const noSuchNote = () => new AppError('notFound', 'There is no such note.');

/** The note of this number in the actor's team. The same answer for another team's note and for none. */
export async function get(actor: Actor, number: string): Promise<NoteHead> {
	demand(actor, 'readFrozen');
	const wanted = parseNumber(number);
	if (!wanted) throw noSuchNote();
	const [found] = await db()
		.select({
			note,
			state: noteStanding.state,
			revision: noteStanding.letter,
			revisions: noteStanding.revisions,
		})
		.from(note)
		.innerJoin(team, eq(team.id, note.teamId))
		.innerJoin(noteStanding, eq(noteStanding.noteId, note.id))
		.where(
			and(
				eq(note.teamId, actor.teamId),
				eq(team.notePrefix, wanted.prefix),
				eq(note.number, wanted.number),
			),
		);
	if (!found || hidden(actor, found.revisions)) throw noSuchNote();
	const { id, title, epoch, changedAt, seq } = found.note;
	return {
		id,
		number,
		title,
		epoch,
		changedAt: changedAt.toISOString(),
		seq,
		state: found.state,
		revision: found.revision,
	};
}

/** What a socket may do with a note's working copy. */
export async function access(
	actor: Actor,
	noteId: string,
): Promise<{ id: string; epoch: string; mayWrite: boolean }> {
	demand(actor, 'readWorkingCopy');
	if (!/^[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$/.test(noteId)) throw noSuchNote();
	const [found] = await db()
		.select({ id: note.id, epoch: note.epoch })
		.from(note)
		.where(and(eq(note.id, noteId), eq(note.teamId, actor.teamId)));
	if (!found) throw noSuchNote();
	return { ...found, mayWrite: may(actor.role, 'write') };
}

/** Makes a note under the team's next number, its document seeded in the same transaction. */
export async function create(
	actor: Actor,
	{
		title,
		cells = firstCells,
	}: { title: string; cells?: Omit<NoteContent['cells'][number], 'id'>[] },
): Promise<{ id: string; number: string }> {
	demand(actor, 'write');
	return await db().transaction(async (tx) => {
		const [numbered] = await tx
			.update(team)
			.set({ nextNoteNumber: sql`${team.nextNoteNumber} + 1` })
			.where(eq(team.id, actor.teamId))
			.returning({ prefix: team.notePrefix, next: team.nextNoteNumber });
		if (!numbered) throw new AppError('notFound', 'Your team does not exist any more.');
		const number = numbered.next - 1;
		const by = actor.personId;
		const [made] = await tx
			.insert(note)
			.values({ teamId: actor.teamId, number, title, createdBy: by, changedBy: by })
			.returning({ id: note.id });
		if (!made) throw new Error('the note was not stored');
		await updates.seed(tx, made.id, by, { title, cells });
		const written = formatNumber(numbered.prefix, number);
		await audit.record(tx, actor, 'note created', `note:${made.id}`, {
			after: { number: written, title },
		});
		return { id: made.id, number: written };
	});
}

const firstCells = [{ kind: 'text' as const, source: '## Purpose\n\n' }];

/** Readers do not learn of a note before its first frozen revision. */
function hidden(actor: Actor, revisions: number): boolean {
	return revisions === 0 && !may(actor.role, 'readWorkingCopy');
}
