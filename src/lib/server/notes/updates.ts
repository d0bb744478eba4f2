import { AppError } from '$lib/errors';
import { seedContent, type NoteCell } from '$lib/note/document';
import { and, asc, eq, gt, inArray } from 'drizzle-orm';
import * as Y from 'yjs';
import { db, type Connection } from '../db/client';
import { note, noteUpdate } from '../db/schema/notes';
import { person } from '../db/schema/people';

/** A change of a note's working copy: raw update bytes, under the id its client chose. */
export interface Edit {
	id: string;
	personId: string;
	bytes: Uint8Array;
}

/** Where the log stands after an append; `first` is the sequence number of the first new row, if there was one. */
export interface Appended {
	seq: number;
	first: number | undefined;
	at: Date;
}

/**
 * Stores edits in one transaction, in order, and returns after its commit. An edit whose id the note
 * already has is not stored again, so an append that may or may not have been committed can be repeated.
 */
export async function append(noteId: string, edits: readonly Edit[]): Promise<Appended> {
	return db().transaction(async (tx) => {
		const [head] = await tx
			.select({ seq: note.seq, at: note.changedAt })
			.from(note)
			.where(eq(note.id, noteId))
			.for('update');
		if (!head) throw new AppError('notFound', 'This note does not exist.');
		const known = await tx
			.select({ id: noteUpdate.clientEditId })
			.from(noteUpdate)
			.where(
				and(
					eq(noteUpdate.noteId, noteId),
					inArray(
						noteUpdate.clientEditId,
						edits.map((edit) => edit.id),
					),
				),
			);
		const taken = new Set(known.map((row) => row.id));
		const fresh = edits.filter((edit) => !taken.has(edit.id) && taken.add(edit.id));
		const last = fresh.at(-1);
		if (!last) return { seq: head.seq, first: undefined, at: head.at };

		const at = new Date();
		const seq = head.seq + fresh.length;
		await tx.insert(noteUpdate).values(
			fresh.map((edit, index) => ({
				noteId,
				seq: head.seq + 1 + index,
				clientEditId: edit.id,
				personId: edit.personId,
				at,
				bytes: edit.bytes,
			})),
		);
		await tx
			.update(note)
			.set({ seq, changedAt: at, changedBy: last.personId })
			.where(eq(note.id, noteId));
		return { seq, first: head.seq + 1, at };
	});
}

/** Rows after a sequence number, oldest first. */
export async function rowsSince(
	noteId: string,
	seq: number,
): Promise<{ seq: number; bytes: Uint8Array }[]> {
	return db()
		.select({ seq: noteUpdate.seq, bytes: noteUpdate.bytes })
		.from(noteUpdate)
		.where(and(eq(noteUpdate.noteId, noteId), gt(noteUpdate.seq, seq)))
		.orderBy(asc(noteUpdate.seq));
}

/** Applies rows in order in one Yjs transaction. Throws where a row cannot be read. */
export function applyRows(
	doc: Y.Doc,
	rows: readonly { bytes: Uint8Array }[],
	origin: unknown,
): void {
	doc.transact(() => {
		for (const row of rows) Y.applyUpdate(doc, row.bytes, origin);
	}, origin);
}

/** Whether a document holds updates that wait for others before they count. */
export function isPending(doc: Y.Doc): boolean {
	return doc.store.pendingStructs !== null || doc.store.pendingDs !== null;
}

/**
 * The working copy at the newest sequence number. Any failure throws: an empty document is never
 * returned in place of one that could not be read.
 */
export async function loadDocument(
	noteId: string,
): Promise<{ doc: Y.Doc; seq: number; epoch: string; pending: boolean }> {
	const { head, rows } = await db().transaction(
		async (tx) => {
			const [head] = await tx
				.select({ seq: note.seq, epoch: note.epoch })
				.from(note)
				.where(eq(note.id, noteId));
			if (!head) throw new AppError('notFound', 'This note does not exist.');
			const rows = await tx
				.select({ seq: noteUpdate.seq, bytes: noteUpdate.bytes })
				.from(noteUpdate)
				.where(eq(noteUpdate.noteId, noteId))
				.orderBy(asc(noteUpdate.seq));
			return { head, rows };
		},
		{ isolationLevel: 'repeatable read', accessMode: 'read only' },
	);
	if ((rows.at(-1)?.seq ?? 0) !== head.seq || rows.length !== head.seq) {
		throw new AppError('unavailable', 'The note could not be read completely.', {
			details: { noteId, seq: head.seq, rows: rows.length },
		});
	}
	const doc = new Y.Doc();
	applyRows(doc, rows, 'database');
	return { doc, seq: head.seq, epoch: head.epoch, pending: isPending(doc) };
}

/** Newest sequence number and epoch of each of the notes that exist. */
export async function heads(
	noteIds: readonly string[],
): Promise<Map<string, { seq: number; epoch: string }>> {
	const rows = await db()
		.select({ id: note.id, seq: note.seq, epoch: note.epoch })
		.from(note)
		.where(inArray(note.id, [...noteIds]));
	return new Map(rows.map(({ id, seq, epoch }) => [id, { seq, epoch }]));
}

/** Writes a new note's first content. Call it once, in the transaction that creates the note. */
export async function seed(
	connection: Connection,
	noteId: string,
	personId: string,
	content: { title: string; cells: Omit<NoteCell, 'id'>[] },
): Promise<void> {
	const doc = new Y.Doc();
	seedContent(doc, content);
	await connection.insert(noteUpdate).values({
		noteId,
		seq: 1,
		clientEditId: 'seed',
		personId,
		bytes: Y.encodeStateAsUpdate(doc),
	});
	await connection.update(note).set({ seq: 1 }).where(eq(note.id, noteId));
	doc.destroy();
}

/** People who wrote in the working copy after a sequence number, by name. */
export async function authorsSince(
	noteId: string,
	seq: number,
): Promise<{ id: string; name: string }[]> {
	return db()
		.selectDistinct({ id: person.id, name: person.name })
		.from(noteUpdate)
		.innerJoin(person, eq(person.id, noteUpdate.personId))
		.where(and(eq(noteUpdate.noteId, noteId), gt(noteUpdate.seq, seq)))
		.orderBy(asc(person.name), asc(person.id));
}
