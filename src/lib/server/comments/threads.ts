import { AppError } from '$lib/errors';
import type { newComment, newThread, Thread, ThreadChange } from '$lib/schemas/comments';
import { and, asc, eq } from 'drizzle-orm';
import { alias } from 'drizzle-orm/pg-core';
import type { z } from 'zod';
import * as audit from '../audit/audit';
import { demand, type Actor } from '../auth/access';
import { db, type Connection } from '../db/client';
import { notify } from '../db/notify';
import { comment, thread, threadChange } from '../db/schema/notes';
import { person } from '../db/schema/people';
import { lock } from '../notes/lock';
import * as notes from '../notes/notes';
import * as trials from '../trial/trial';
import * as mentions from './mentions';

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
		await say(tx, actor, made.id, body, trial);
		await audit.record(tx, actor, 'thread opened', `note:${noteId}`, {
			after: { thread: made.id, ...about, body, ...(trial && { trial: trial.changes }) },
		});
		return made.id;
	});
}

/**
 * Adds a comment to a thread. With `answers` it hands the thread back to whoever opened it; a reply of that person's
 * opens it again.
 */
export async function reply(
	actor: Actor,
	number: string,
	threadId: string,
	{ body, trial: changes, answers = false }: z.output<typeof newComment>,
): Promise<Thread> {
	demand(actor, 'comment');
	const trial = changes && (await trials.attach(actor, number, changes));
	return await change(actor, number, async (tx, noteId) => {
		const before = await find(tx, noteId, threadId);
		const isOpener = (await openerOf(tx, threadId)) === actor.personId;
		if (answers && isOpener) {
			throw new AppError('conflict', 'Whoever opened a comment closes it; others answer it.');
		}
		if (answers && before.closedAt) {
			throw new AppError('conflict', 'It is closed by now. Reopen it first.');
		}
		await say(tx, actor, threadId, body, trial);
		const reopens = isOpener && before.answeredAt !== null && before.closedAt === null;
		if (answers || reopens) {
			await mark(tx, actor, threadId, answers ? 'answered' : 'reopened', {
				answeredAt: answers ? new Date() : null,
				answeredBy: answers ? actor.personId : null,
			});
		}
		await audit.record(
			tx,
			actor,
			answers ? 'comment answered' : 'comment added',
			`note:${noteId}`,
			{
				after: { thread: threadId, body, ...(trial && { trial: trial.changes }) },
			},
		);
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
		await mark(tx, actor, threadId, closed ? 'closed' : 'reopened', {
			closedAt: closed ? new Date() : null,
			closedBy: closed ? actor.personId : null,
			...(!closed && { answeredAt: null, answeredBy: null }),
		});
		await audit.record(tx, actor, closed ? 'thread closed' : 'thread reopened', `note:${noteId}`, {
			after: { thread: threadId },
		});
		return threadId;
	});
}

/** Lets a thread block freezing, or no longer. */
export async function setBlocking(
	actor: Actor,
	number: string,
	threadId: string,
	blocking: boolean,
): Promise<Thread> {
	demand(actor, 'comment');
	return await change(actor, number, async (tx, noteId) => {
		const before = await find(tx, noteId, threadId);
		if (before.blocking === blocking) return threadId;
		await mark(tx, actor, threadId, blocking ? 'blocking' : 'not blocking', { blocking });
		await audit.record(
			tx,
			actor,
			blocking ? 'comment made blocking' : 'comment made not blocking',
			`note:${noteId}`,
			{ after: { thread: threadId } },
		);
		return threadId;
	});
}

async function say(
	tx: Connection,
	actor: Actor,
	threadId: string,
	body: string,
	trial: (typeof comment.$inferInsert)['trial'],
): Promise<void> {
	const named = await mentions.named(tx, actor, body);
	const [made] = await tx
		.insert(comment)
		.values({ threadId, personId: actor.personId, body: named.body, trial })
		.returning({ id: comment.id });
	if (!made) throw new Error('the comment was not stored');
	await mentions.keep(tx, actor, { id: made.id, threadId }, named.personIds, body);
}

/** Changes where a thread stands, and records that in the thread. */
async function mark(
	tx: Connection,
	actor: Actor,
	threadId: string,
	what: ThreadChange['what'],
	values: Partial<typeof thread.$inferInsert>,
): Promise<void> {
	await tx.update(thread).set(values).where(eq(thread.id, threadId));
	await tx.insert(threadChange).values({ threadId, personId: actor.personId, what });
}

async function openerOf(tx: Connection, threadId: string): Promise<string | undefined> {
	const [first] = await tx
		.select({ personId: comment.personId })
		.from(comment)
		.where(eq(comment.threadId, threadId))
		.orderBy(asc(comment.at), asc(comment.id))
		.limit(1);
	return first?.personId;
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
	const answerer = alias(person, 'answerer');
	const rows = await connection
		.select({ thread, comment, author: person.name, closer: closer.name, answerer: answerer.name })
		.from(thread)
		.innerJoin(comment, eq(comment.threadId, thread.id))
		.innerJoin(person, eq(person.id, comment.personId))
		.leftJoin(closer, eq(closer.id, thread.closedBy))
		.leftJoin(answerer, eq(answerer.id, thread.answeredBy))
		.where(eq(thread.noteId, noteId))
		.orderBy(asc(comment.at), asc(comment.id));
	const people = await mentions.inNote(connection, noteId);
	const threads = new Map<string, Thread>();
	for (const { thread: row, comment: said, author, closer: by, answerer: from } of rows) {
		const { id, cellId, kind, blocking, closedAt, answeredAt, anchor } = row;
		const entry = threads.get(id) ?? {
			id,
			cellId,
			kind,
			blocking,
			...(anchor && { anchor }),
			...(answeredAt && { answered: { at: answeredAt.toISOString(), by: from ?? '' } }),
			closed: closedAt && { at: closedAt.toISOString(), by: by ?? '' },
			comments: [],
		};
		const named = people.get(said.id) ?? [];
		entry.comments.push({
			id: said.id,
			person: { id: said.personId, name: author },
			body: mentions.spoken(said.body, named),
			...(named.length > 0 && { mentions: named }),
			...(said.trial && { trial: said.trial }),
			at: said.at.toISOString(),
		});
		threads.set(id, entry);
	}
	for (const { threadId, what, at, by } of await changesOf(connection, noteId)) {
		const entry = threads.get(threadId);
		if (entry) (entry.changes ??= []).push({ what, by, at: at.toISOString() });
	}
	return [...threads.values()];
}

async function changesOf(connection: Connection, noteId: string) {
	return connection
		.select({
			threadId: threadChange.threadId,
			what: threadChange.what,
			at: threadChange.at,
			by: person.name,
		})
		.from(threadChange)
		.innerJoin(thread, eq(thread.id, threadChange.threadId))
		.innerJoin(person, eq(person.id, threadChange.personId))
		.where(eq(thread.noteId, noteId))
		.orderBy(asc(threadChange.at), asc(threadChange.id));
}
