import { sql } from 'drizzle-orm';
import * as Y from 'yjs';
import { placedCells } from '$lib/note/document';
import { touchedBy } from '$lib/note/touched';
import type { Actor } from '$lib/server/auth/access';
import { db } from '$lib/server/db/client';
import { note, noteUpdate } from '$lib/server/db/schema/notes';
import { loadDocument } from '$lib/server/notes/updates';
import { eq } from 'drizzle-orm';

type NewRow = typeof noteUpdate.$inferInsert;

/** People who type in a stored note at times of the test's choosing; what they do is kept as rows until it is written. */
export class LongLog {
	readonly rows: NewRow[] = [];
	readonly doc: Y.Doc;
	readonly #noteId: string;
	readonly #docs = new Map<string, Y.Doc>();
	#seq: number;

	static async of(noteId: string): Promise<LongLog> {
		const { doc, seq } = await loadDocument(noteId);
		return new LongLog(noteId, doc, seq);
	}

	private constructor(noteId: string, doc: Y.Doc, seq: number) {
		this.#noteId = noteId;
		this.doc = doc;
		this.#seq = seq;
	}

	/** A change of the note by a person, as one update. */
	change(by: Actor, at: Date, make: (doc: Y.Doc) => void): void {
		const doc = this.#docOf(by);
		const before = Y.encodeStateVector(doc);
		const cells = touchedBy(doc, () => doc.transact(() => make(doc)));
		const bytes = Y.encodeStateAsUpdate(doc, before);
		Y.applyUpdate(this.doc, bytes);
		for (const other of this.#docs.values()) if (other !== doc) Y.applyUpdate(other, bytes);
		this.#push(by, at, bytes, cells);
	}

	/** Many keys of one person, typed and deleted in one cell, each as an update as a page sends it. */
	type(by: Actor, cell: number, at: (index: number) => Date, keys: number): void {
		const doc = this.#docOf(by);
		const { text, id } = placedCells(doc)[cell]!;
		let place = text.length;
		let index = 0;
		const onUpdate = (bytes: Uint8Array) => {
			this.#push(by, at(index), bytes, [id]);
			index += 1;
		};
		doc.on('update', onUpdate);
		for (let key = 0; key < keys; key += 1) {
			if (key % 40 === 39) place = (place * 7919) % (text.length + 1);
			if (key % 9 === 8 && place > 0) text.delete((place -= 1), 1);
			else text.insert(place++, 'abc 12\n'[key % 7]!);
		}
		doc.off('update', onUpdate);
		const state = Y.encodeStateAsUpdate(doc);
		for (const other of [this.doc, ...this.#docs.values()]) Y.applyUpdate(other, state);
	}

	/** Puts everything into the database. */
	async write(): Promise<void> {
		for (let at = 0; at < this.rows.length; at += 5000) {
			await db()
				.insert(noteUpdate)
				.values(this.rows.slice(at, at + 5000));
		}
		this.rows.length = 0;
		await db().update(note).set({ seq: this.#seq }).where(eq(note.id, this.#noteId));
	}

	#docOf(by: Actor): Y.Doc {
		const known = this.#docs.get(by.personId);
		if (known) return known;
		const doc = new Y.Doc();
		Y.applyUpdate(doc, Y.encodeStateAsUpdate(this.doc));
		this.#docs.set(by.personId, doc);
		return doc;
	}

	#push(by: Actor, at: Date, bytes: Uint8Array, cells: string[]): void {
		this.#seq += 1;
		this.rows.push({
			noteId: this.#noteId,
			seq: this.#seq,
			clientEditId: `edit-${this.#seq}`,
			personId: by.personId,
			at,
			bytes,
			cells,
		});
	}
}

/** Size of a note's stored rows and snapshots. */
export async function stored(
	noteId: string,
): Promise<{ rows: number; bytes: number; state: number }> {
	const { rows } = await db().execute<{ rows: number; bytes: number; state: number }>(sql`
		select count(*)::int as rows, sum(octet_length(bytes))::int as bytes,
			(select octet_length(state) from note_snapshot s where s.note_id = u.note_id order by seq desc limit 1) as state
		from note_update u where note_id = ${noteId} group by note_id`);
	return rows[0]!;
}
