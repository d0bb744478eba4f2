import { AppError } from '$lib/errors';
import type { KeptTrial, TrialChange } from '$lib/schemas/trial';
import { and, asc, eq } from 'drizzle-orm';
import * as audit from '../audit/audit';
import { demand, type Actor } from '../auth/access';
import { db } from '../db/client';
import { keptTrial } from '../db/schema/notes';
import { lock } from '../notes/lock';
import * as notes from '../notes/notes';

/** Trials of one note that a person may keep. */
const most = 50;

/** The trials of a note that this person keeps, in the order they were kept. */
export async function list(actor: Actor, number: string): Promise<KeptTrial[]> {
	demand(actor, 'readWorkingCopy');
	const { id: noteId } = await notes.get(actor, number);
	const rows = await db()
		.select()
		.from(keptTrial)
		.where(own(actor, noteId))
		.orderBy(asc(keptTrial.at), asc(keptTrial.id));
	return rows.map(shown);
}

/** Keeps a trial for this person alone. The audit trail tells that one was kept, not what it says. */
export async function keep(
	actor: Actor,
	number: string,
	{ title, changes }: { title: string; changes: TrialChange[] },
): Promise<KeptTrial> {
	demand(actor, 'readWorkingCopy');
	const { id: noteId } = await notes.get(actor, number);
	return await db().transaction(async (tx) => {
		await lock(tx, noteId);
		if ((await tx.$count(keptTrial, own(actor, noteId))) >= most) {
			throw new AppError('invalid', `You keep ${most} trials of this note. Delete one first.`);
		}
		const [made] = await tx
			.insert(keptTrial)
			.values({ noteId, personId: actor.personId, title, changes })
			.returning();
		if (!made) throw new Error('the trial was not stored');
		await audit.record(tx, actor, 'trial kept', `note:${noteId}`, { after: { trial: made.id } });
		return shown(made);
	});
}

export async function remove(actor: Actor, number: string, trialId: string): Promise<void> {
	demand(actor, 'readWorkingCopy');
	const { id: noteId } = await notes.get(actor, number);
	await db().transaction(async (tx) => {
		const gone = await tx
			.delete(keptTrial)
			.where(and(own(actor, noteId), eq(keptTrial.id, trialId)))
			.returning({ id: keptTrial.id });
		if (gone.length === 0) throw new AppError('notFound', 'There is no such trial of yours.');
		await audit.record(tx, actor, 'trial deleted', `note:${noteId}`, { after: { trial: trialId } });
	});
}

function own({ personId }: Actor, noteId: string) {
	return and(eq(keptTrial.noteId, noteId), eq(keptTrial.personId, personId));
}

function shown({ id, title, changes, at }: typeof keptTrial.$inferSelect): KeptTrial {
	return { id, title, changes, at: at.toISOString() };
}
