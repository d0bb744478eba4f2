import { engineVersion } from '$lib/calc/engine';
import type { Evaluation } from '$lib/calc/results';
import { AppError } from '$lib/errors';
import { toContent, type NoteContent } from '$lib/note/document';
import { and, eq, getTableColumns, lte, ne, sql } from 'drizzle-orm';
import { db } from '../db/client';
import { evaluation, note } from '../db/schema/notes';
import * as updates from '../notes/updates';
import { optionsOf } from './note-options';
import { evaluateInChild } from './pool';

/** A note's content at a sequence number, with its results. */
export interface Stored {
	seq: number;
	content: NoteContent;
	results: Evaluation;
}

/** What an insert offers for each column: named in its place, a note's results travel once. */
const offered = Object.fromEntries(
	Object.entries(getTableColumns(evaluation)).map(([key, { name }]) => [
		key,
		sql`excluded.${sql.identifier(name)}`,
	]),
);

/** Keeps the results of a note at a sequence number, and its title for lists. Never replaces those of a newer one. */
export async function save(noteId: string, { seq, content, results }: Stored): Promise<void> {
	const row = { noteId, seq, engine: results.engine, content, results, ...tally(results) };
	await db().transaction(async (tx) => {
		const kept = await tx
			.insert(evaluation)
			.values(row)
			.onConflictDoUpdate({
				target: evaluation.noteId,
				set: offered,
				setWhere: lte(evaluation.seq, seq),
			})
			.returning({ seq: evaluation.seq });
		if (kept.length === 0) return;
		const title = content.title.trim().slice(0, 200) || 'Untitled';
		await tx
			.update(note)
			.set({ title })
			.where(and(eq(note.id, noteId), ne(note.title, title)));
	});
}

function tally(results: Evaluation) {
	const count = (verdict: string) =>
		results.requirements.filter((requirement) => requirement.verdict === verdict).length;
	return {
		met: count('met'),
		notMet: count('not met'),
		undecided: count('undecided'),
		faults: new Set(results.errors.map((fault) => `${fault.cell}:${fault.line}`)).size,
	};
}

/** The last stored results, of whatever sequence number. */
export async function find(noteId: string): Promise<Stored | undefined> {
	const [row] = await db()
		.select({ seq: evaluation.seq, content: evaluation.content, results: evaluation.results })
		.from(evaluation)
		.where(eq(evaluation.noteId, noteId));
	return row;
}

/**
 * Content and results at the newest sequence number, evaluated now where the stored ones are older or come
 * from another engine. `pending` says that the log holds updates that wait for others and do not count yet.
 */
export async function current(noteId: string): Promise<Stored & { pending: boolean }> {
	const [row] = await db()
		.select({
			newest: note.seq,
			seq: evaluation.seq,
			engine: evaluation.engine,
			content: evaluation.content,
			results: evaluation.results,
		})
		.from(note)
		.leftJoin(evaluation, eq(evaluation.noteId, note.id))
		.where(eq(note.id, noteId));
	if (!row) throw new AppError('notFound', 'This note does not exist.');
	const { seq, content, results } = row;
	// Results of a document with pending updates are never stored, so stored ones have none.
	if (content && results && seq === row.newest && row.engine === engineVersion) {
		return { seq, content, results, pending: false };
	}
	return evaluateNow(noteId);
}

async function evaluateNow(noteId: string): Promise<Stored & { pending: boolean }> {
	const { doc, seq, pending } = await updates.loadDocument(noteId);
	const content = toContent(doc);
	doc.destroy();
	const results = await evaluateInChild(content.cells, optionsOf(content));
	if (!pending) await save(noteId, { seq, content, results });
	return { seq, content, results, pending };
}
