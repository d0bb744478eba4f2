import { AppError } from '$lib/errors';
import type { newComment, newThread, Thread } from '$lib/schemas/comments';
import { and, asc, eq } from 'drizzle-orm';
import { alias } from 'drizzle-orm/pg-core';
import type { z } from 'zod';
import * as audit from '../audit/audit';
import { demand, type Actor } from '../auth/access';
import { db, type Connection } from '../db/client';
import { notify } from '../db/notify';
import { comment, thread } from '../db/schema/notes';
import { person } from '../db/schema/people';
import { lock } from '../notes/lock';
import * as notes from '../notes/notes';
import * as trials from '../trial/trial';

/** The threads of a note in the order they were opened. */
export async function list(actor: Actor, number: string): Promise<Thread[]> {
	demand(actor, 'readWorkingCopy');
	return read(db(), (await notes.get(actor, number)).id);
}

/** Opens a thread on a cell with its first comment. */
export async function open(
	actor: Actor,
	number: string,
	{ body, trial: changes, ...about }: z.output<typeof newThread>,
): Promise<Thread> {
	demand(actor, 'comment');
	const trial = changes && (await trials.attach(actor, number, changes));
	return await change(actor, number, async (tx, noteId) => {
		const [made] = await tx
			.insert(thread)
			.values({ noteId, ...about })
			.returning({ id: thread.id });
		if (!made) throw new Error('the thread was not stored');
		await tx.insert(comment).values({ threadId: made.id, personId: actor.personId, body, trial });
		await audit.record(tx, actor, 'thread opened', `note:${noteId}`, {
			after: { thread: made.id, ...about, body, ...(trial && { trial: trial.changes }) },
		});
		return made.id;
	});
}

/** Adds a comment to a thread. */
export async function reply(
	actor: Actor,
	number: string,
	threadId: string,
	{ body, trial: changes }: z.output<typeof newComment>,
): Promise<Thread> {
	demand(actor, 'comment');
	const trial = changes && (await trials.attach(actor, number, changes));
	return await change(actor, number, async (tx, noteId) => {
		await find(tx, noteId, threadId);
		await tx.insert(comment).values({ threadId, personId: actor.personId, body, trial });
		await audit.record(tx, actor, 'comment added', `note:${noteId}`, {
			after: { thread: threadId, body, ...(trial && { trial: trial.changes }) },
		});
		return threadId;
	});
}

/** Closes a thread, or opens it again. */
export async function setClosed(
	actor: Actor,
	number: string,
	threadId: string,
	closed: boolean,
): Promise<Thread> {
	demand(actor, 'comment');
	return await change(actor, number, async (tx, noteId) => {
		const before = await find(tx, noteId, threadId);
		if ((before.closedAt !== null) === closed) return threadId;
		await tx
			.update(thread)
			.set({ closedAt: closed ? new Date() : null, closedBy: closed ? actor.personId : null })
			.where(eq(thread.id, threadId));
		await audit.record(tx, actor, closed ? 'thread closed' : 'thread reopened', `note:${noteId}`, {
			after: { thread: threadId },
		});
		return threadId;
	});
}

/** Does a deed under the note's lock, tells the others, and returns the thread as it is then. */
async function change(
	actor: Actor,
	number: string,
	deed: (tx: Connection, noteId: string) => Promise<string>,
): Promise<Thread> {
	demand(actor, 'readWorkingCopy');
	const { id: noteId } = await notes.get(actor, number);
	const changed = await db().transaction(async (tx) => {
		await lock(tx, noteId);
		const threadId = await deed(tx, noteId);
		return (await read(tx, noteId)).find((one) => one.id === threadId);
	});
	await notify(noteId, 'comments');
	if (!changed) throw new Error('the thread was not found after it was stored');
	return changed;
}

async function find(tx: Connection, noteId: string, threadId: string) {
	const [found] = await tx
		.select()
		.from(thread)
		.where(and(eq(thread.id, threadId), eq(thread.noteId, noteId)));
	if (!found) throw new AppError('notFound', 'There is no such thread.');
	return found;
}

/** The same within a deed that has asked who may. */
export async function read(connection: Connection, noteId: string): Promise<Thread[]> {
	const closer = alias(person, 'closer');
	const rows = await connection
		.select({ thread, comment, author: person.name, closer: closer.name })
		.from(thread)
		.innerJoin(comment, eq(comment.threadId, thread.id))
		.innerJoin(person, eq(person.id, comment.personId))
		.leftJoin(closer, eq(closer.id, thread.closedBy))
		.where(eq(thread.noteId, noteId))
		.orderBy(asc(comment.at), asc(comment.id));
	const threads = new Map<string, Thread>();
	for (const { thread: row, comment: said, author, closer: by } of rows) {
		const { id, cellId, kind, blocking, closedAt } = row;
		const closed = closedAt && { at: closedAt.toISOString(), by: by ?? '' };
		const entry = threads.get(id) ?? { id, cellId, kind, blocking, closed, comments: [] };
		entry.comments.push({
			id: said.id,
			person: { id: said.personId, name: author },
			body: said.body,
			...(said.trial && { trial: said.trial }),
			at: said.at.toISOString(),
		});
		threads.set(id, entry);
	}
	return [...threads.values()];
}
