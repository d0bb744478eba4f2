import { AppError } from '$lib/errors';
import { cellsOf, seedContent, type NoteCell } from '$lib/note/document';
import { ownChanges } from '$lib/note/own-changes';
import { clientsIn, touchedBy } from '$lib/note/touched';
import { and, asc, eq, gt, inArray } from 'drizzle-orm';
import * as Y from 'yjs';
import { db, type Connection } from '../db/client';
import { cellAuthor, note, noteClient, noteUpdate } from '../db/schema/notes';
import { person } from '../db/schema/people';
import { append, type Edit } from './append';
import * as authorship from './authorship';
import * as clients from './clients';
import { documentOf, readState } from './stored-log';

/** A stored update. */
export interface Row {
	seq: number;
	personId: string;
	bytes: Uint8Array;
	/** Cells that it changed. */
	cells: string[];
}

/** Rows after a sequence number, oldest first. */
export async function rowsSince(noteId: string, seq: number): Promise<Row[]> {
	return db()
		.select({
			seq: noteUpdate.seq,
			personId: noteUpdate.personId,
			bytes: noteUpdate.bytes,
			cells: noteUpdate.cells,
		})
		.from(noteUpdate)
		.where(and(eq(noteUpdate.noteId, noteId), gt(noteUpdate.seq, seq)))
		.orderBy(asc(noteUpdate.seq));
}

/** Whether a document holds updates that wait for others before they count. */
export function isPending(doc: Y.Doc): boolean {
	return doc.store.pendingStructs !== null || doc.store.pendingDs !== null;
}

/** A working copy as it is stored. */
export interface Loaded {
	doc: Y.Doc;
	seq: number;
	epoch: string;
	/** Whether it holds updates that wait for others. */
	pending: boolean;
	/** Whose each Yjs client id in it is. */
	clients: Map<number, string>;
	/** Sequence number of the snapshot it was loaded from, 0 without one. */
	snapshotSeq: number;
}

/**
 * The working copy at the newest sequence number. Any failure throws: an empty document is never
 * returned in place of one that could not be read.
 */
export async function loadDocument(noteId: string): Promise<Loaded> {
	const { head, state, owners } = await db().transaction(
		async (tx) => {
			const [head] = await tx
				.select({ seq: note.seq, epoch: note.epoch })
				.from(note)
				.where(eq(note.id, noteId));
			if (!head) throw new AppError('notFound', 'This note does not exist.');
			const state = await readState(tx, noteId, head.seq);
			return { head, state, owners: await clients.read(tx, noteId) };
		},
		{ isolationLevel: 'repeatable read', accessMode: 'read only' },
	);
	const doc = documentOf(state);
	return {
		doc,
		seq: head.seq,
		epoch: head.epoch,
		pending: isPending(doc),
		clients: owners,
		snapshotSeq: state.snapshot?.seq ?? 0,
	};
}

/** Changes a note's working copy as a person who has no page open. */
export async function change(
	noteId: string,
	personId: string,
	make: (doc: Y.Doc) => void,
): Promise<void> {
	const { doc } = await loadDocument(noteId);
	const cells = touchedBy(doc, () => doc.transact(() => make(doc)));
	const bytes = ownChanges(doc, 0);
	doc.destroy();
	const id = crypto.randomUUID();
	await append(noteId, [{ id, personId, bytes, clients: clientsIn(bytes), cells }]);
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
	const edit: Edit = {
		id: 'seed',
		personId,
		bytes: Y.encodeStateAsUpdate(doc),
		clients: [doc.clientID],
		cells: [...cellsOf(doc).keys()],
	};
	const at = new Date();
	await connection.insert(noteUpdate).values({
		noteId,
		seq: 1,
		clientEditId: edit.id,
		personId,
		at,
		bytes: edit.bytes,
		cells: [...edit.cells],
	});
	await connection.insert(noteClient).values({ noteId, clientId: doc.clientID, personId });
	const authors = authorship.lastIn([edit], 1);
	if (authors.length > 0) {
		await connection
			.insert(cellAuthor)
			.values(authors.map((author) => ({ noteId, at, ...author })));
	}
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
