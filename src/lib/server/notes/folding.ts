import { and, asc, eq, isNotNull, isNull, lt, lte, gt, sql } from 'drizzle-orm';
import { setImmediate } from 'node:timers/promises';
import * as Y from 'yjs';
import { db } from '../db/client';
import { noteUpdate } from '../db/schema/notes';
import { candidate } from '../db/schema/review';
import { newest } from './snapshots';
import { startOf } from './stored-log';
import { grains, stretchesOf, type LogRow, type Stretch } from './stretches';

/** Rows that are looked at at once, and the fewest that are worth folding. */
const atOnce = 2000;
const worthwhile = 200;

/** Folded rows a note may have, and those that stay as fine as they are when there are more. */
const most = 1000;
const spared = 500;

/** Updates younger than this stay as they came: their pages may not know yet that they are stored. */
const restMs = 15 * 60_000;

/** Updates merged without giving way to other work. */
const mergedAtOnce = 64;

/**
 * Folds a note's old updates: one row per author and stretch of work instead of one per keystroke. Nothing is lost but
 * the moments inside a stretch: a document made of the rows is the same before and after. A note with many stretches
 * has its oldest ones joined to longer ones, so that its rows stay bounded.
 */
export async function fold(noteId: string, now = Date.now()): Promise<void> {
	const snapshotSeq = await newest(noteId);
	if (snapshotSeq === 0) return;
	const boundaries = await candidateSeqs(noteId);
	await foldFresh(noteId, snapshotSeq, new Date(now - restMs), boundaries);
	for (const grain of grains.slice(1)) {
		const old = await oldest(noteId);
		if (old.length === 0) return;
		for (const stretch of stretchesOf(old, grain, boundaries)) await foldStretch(noteId, stretch);
	}
}

async function foldFresh(
	noteId: string,
	snapshotSeq: number,
	before: Date,
	boundaries: ReadonlySet<number>,
): Promise<void> {
	for (let seq = 0, first = true; ; first = false) {
		const rows = await db()
			.select(columns)
			.from(noteUpdate)
			.where(
				and(
					eq(noteUpdate.noteId, noteId),
					isNull(noteUpdate.firstSeq),
					gt(noteUpdate.seq, seq),
					lte(noteUpdate.seq, snapshotSeq),
					lt(noteUpdate.at, before),
				),
			)
			.orderBy(asc(noteUpdate.seq))
			.limit(atOnce);
		const last = rows.at(-1);
		if (!last || (first && rows.length < worthwhile)) return;
		for (const stretch of stretchesOf(rows, grains[0], boundaries)) {
			await foldStretch(noteId, stretch);
		}
		seq = last.seq;
	}
}

/** The oldest folded rows of a note that has too many of them. */
async function oldest(noteId: string): Promise<LogRow[]> {
	const folded = await db()
		.select(columns)
		.from(noteUpdate)
		.where(and(eq(noteUpdate.noteId, noteId), isNotNull(noteUpdate.firstSeq)))
		.orderBy(asc(noteUpdate.seq));
	if (folded.length <= most) return [];
	const end = folded.at(-spared)?.start;
	return folded.filter(({ start }) => end !== undefined && start < end);
}

const columns = {
	seq: noteUpdate.seq,
	start: startOf.mapWith(Number),
	firstAt: sql<Date>`coalesce(${noteUpdate.firstAt}, ${noteUpdate.at})`.mapWith(noteUpdate.at),
	at: noteUpdate.at,
	personId: noteUpdate.personId,
	folded: sql<boolean>`${noteUpdate.firstSeq} is not null`,
};

async function foldStretch(noteId: string, { first, last, rows }: Stretch): Promise<void> {
	const people = [...new Set(rows.map(({ personId }) => personId))];
	if (rows.length === people.length && rows.every(({ folded }) => folded)) return;
	const stored = await db()
		.select({ personId: noteUpdate.personId, bytes: noteUpdate.bytes })
		.from(noteUpdate)
		.where(
			and(eq(noteUpdate.noteId, noteId), gt(noteUpdate.seq, first - 1), lte(noteUpdate.seq, last)),
		)
		.orderBy(asc(noteUpdate.seq));
	const merged: Uint8Array[] = [];
	for (const person of people) {
		merged.push(
			await mergeAll(
				stored.filter(({ personId }) => personId === person).map(({ bytes }) => bytes),
			),
		);
	}
	const texts = sql`array[${sql.join(
		people.map((id) => sql`${id}`),
		sql`, `,
	)}]::text[]`;
	const bytes = sql`array[${sql.join(
		merged.map((update) => sql`${Buffer.from(update)}`),
		sql`, `,
	)}]::bytea[]`;
	await db().execute(sql`select fold_updates(${noteId}, ${first}, ${last}, ${texts}, ${bytes})`);
}

/** Merges updates in rounds of neighbours: merging takes more than twice as long for twice as many. */
async function mergeAll(updates: readonly Uint8Array[]): Promise<Uint8Array> {
	let round = [...updates];
	while (round.length > 1) {
		const next: Uint8Array[] = [];
		for (let at = 0; at < round.length; at += mergedAtOnce) {
			next.push(Y.mergeUpdates(round.slice(at, at + mergedAtOnce)));
			await setImmediate();
		}
		round = next;
	}
	return round[0] ?? Y.encodeStateAsUpdate(new Y.Doc());
}

async function candidateSeqs(noteId: string): Promise<Set<number>> {
	const rows = await db()
		.select({ seq: candidate.seq })
		.from(candidate)
		.where(eq(candidate.noteId, noteId));
	return new Set(rows.map(({ seq }) => seq));
}
