import { dispositionOf, type Mention } from '$lib/schemas/comments';
import { may } from '$lib/schemas/role';
import { and, asc, desc, eq } from 'drizzle-orm';
import { alias } from 'drizzle-orm/pg-core';
import { demand, type Actor } from '../auth/access';
import { db, type Connection } from '../db/client';
import { comment, mention, note, thread } from '../db/schema/notes';
import { membership, person, team } from '../db/schema/people';
import { tell } from '../mail/outbox';
import * as notes from '../notes/notes';
import { formatNumber } from '../notes/number';

interface Named {
	id: string;
	name: string;
}

/** People who may see a note's comments, and so can be named in them. */
export async function people(actor: Actor, number: string): Promise<Named[]> {
	demand(actor, 'readWorkingCopy');
	await notes.get(actor, number);
	return peopleOf(db(), actor.teamId);
}

/** Comments that name the actor and still wait, then the others, the newest first. */
export async function mentionsOf(actor: Actor): Promise<Mention[]> {
	demand(actor, 'readWorkingCopy');
	const author = alias(person, 'author');
	const rows = await db()
		.select({ comment, thread, note, prefix: team.notePrefix, author: author.name })
		.from(mention)
		.innerJoin(comment, eq(comment.id, mention.commentId))
		.innerJoin(author, eq(author.id, comment.personId))
		.innerJoin(thread, eq(thread.id, comment.threadId))
		.innerJoin(note, eq(note.id, thread.noteId))
		.innerJoin(team, eq(team.id, note.teamId))
		.where(and(eq(mention.personId, actor.personId), eq(note.teamId, actor.teamId)))
		.orderBy(desc(comment.at), desc(comment.id))
		.limit(200);
	const members = await peopleOf(db(), actor.teamId);
	const found = rows.map((row): Mention => {
		const { closedAt, answeredAt } = row.thread;
		return {
			number: formatNumber(row.prefix, row.note.number),
			title: row.note.title,
			threadId: row.thread.id,
			cellId: row.thread.cellId,
			disposition: dispositionOf({
				closed: closedAt && { at: closedAt.toISOString(), by: '' },
				...(answeredAt && { answered: { at: answeredAt.toISOString(), by: '' } }),
			}),
			blocking: row.thread.blocking,
			byId: row.comment.personId,
			by: row.author,
			body: spoken(row.comment.body, members),
			at: row.comment.at.toISOString(),
		};
	});
	const waits = ({ disposition }: Mention) => disposition !== 'closed';
	return [...found.filter(waits), ...found.filter((one) => !waits(one))];
}

/** A body with ids in place of the names that are mentioned in it, `@Cass Kettering`, and whose they are. */
export async function named(
	connection: Connection,
	actor: Actor,
	body: string,
): Promise<{ body: string; personIds: string[] }> {
	if (!body.includes('@')) return { body, personIds: [] };
	const found = new Set<string>();
	// A longer name first: it may begin with a shorter one.
	const members = (await peopleOf(connection, actor.teamId)).sort(
		(a, b) => b.name.length - a.name.length,
	);
	let written = body;
	for (const { id, name } of members) {
		const parts = written.split(`@${name}`);
		const kept = parts.slice(1).reduce((text, part) => {
			// The name may only be the beginning of another word.
			if (/^[\p{L}\p{N}_]/u.test(part)) return `${text}@${name}${part}`;
			found.add(id);
			return `${text}@{${id}}${part}`;
		}, parts[0] ?? '');
		written = kept;
	}
	return { body: written, personIds: [...found] };
}

/** Keeps who is named in a comment, and tells them by mail unless they wrote it. `body` is as it was written. */
export async function keep(
	tx: Connection,
	actor: Actor,
	{ id, threadId }: { id: string; threadId: string },
	personIds: readonly string[],
	body: string,
): Promise<void> {
	if (personIds.length === 0) return;
	await tx.insert(mention).values(personIds.map((personId) => ({ commentId: id, personId })));
	const [about] = await tx
		.select({
			cellId: thread.cellId,
			number: note.number,
			title: note.title,
			prefix: team.notePrefix,
		})
		.from(thread)
		.innerJoin(note, eq(note.id, thread.noteId))
		.innerJoin(team, eq(team.id, note.teamId))
		.where(eq(thread.id, threadId));
	if (!about) return;
	const number = formatNumber(about.prefix, about.number);
	const others = personIds.filter((personId) => personId !== actor.personId);
	await tell(tx, others, {
		teamId: actor.teamId,
		key: `mentioned ${id}`,
		said: {
			...{ what: 'mentioned', number, title: about.title, letter: '', by: actor.name, words: body },
			due: null,
			path: `/notes/${number}#cell-${about.cellId}`,
		},
	});
}

/** A body as it is read: with the names that these people have now. */
export function spoken(body: string, people: readonly Named[]): string {
	return people.reduce((text, { id, name }) => text.replaceAll(`@{${id}}`, `@${name}`), body);
}

/** Who is named in the comments of a note, by comment. */
export async function inNote(
	connection: Connection,
	noteId: string,
): Promise<Map<string, Named[]>> {
	const rows = await connection
		.select({ commentId: mention.commentId, id: person.id, name: person.name })
		.from(mention)
		.innerJoin(comment, eq(comment.id, mention.commentId))
		.innerJoin(thread, eq(thread.id, comment.threadId))
		.innerJoin(person, eq(person.id, mention.personId))
		.where(eq(thread.noteId, noteId))
		.orderBy(asc(person.name), asc(person.id));
	const found = new Map<string, Named[]>();
	for (const { commentId, ...one } of rows) {
		found.set(commentId, [...(found.get(commentId) ?? []), one]);
	}
	return found;
}

async function peopleOf(connection: Connection, teamId: string): Promise<Named[]> {
	const rows = await connection
		.select({ id: person.id, name: person.name, role: membership.role })
		.from(membership)
		.innerJoin(person, eq(person.id, membership.personId))
		.where(eq(membership.teamId, teamId))
		.orderBy(asc(person.name), asc(person.id));
	return rows
		.filter(({ role }) => may(role, 'readWorkingCopy'))
		.map(({ id, name }) => ({ id, name }));
}
