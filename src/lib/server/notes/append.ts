import { AppError } from '$lib/errors';
import { inArray, sql } from 'drizzle-orm';
import { DatabaseError } from 'pg';
import { db, type Connection } from '../db/client';
import { refuseWeak, weakness } from '../db/durability';
import { note } from '../db/schema/notes';
import * as authorship from './authorship';
import * as clients from './clients';

/** A change of a note's working copy: raw update bytes, under the id its client chose. */
export interface Edit {
	id: string;
	personId: string;
	bytes: Uint8Array;
	/** Yjs client ids that the bytes hold content of. */
	clients: readonly number[];
	/** Cells that came, went or changed their text with it. */
	cells: readonly string[];
	/** Others whose earlier edits counted only with this one, and the cells those changed. */
	completed?: readonly { personId: string; cells: readonly string[] }[];
}

/** Where the log stands after an append; `first` is the sequence number of the first new row, if there was one. */
export interface Appended {
	seq: number;
	first: number | undefined;
	at: Date;
}

/** Edits of one note, in their order. */
export interface Batch {
	noteId: string;
	edits: readonly Edit[];
}

/** A note's row, locked, and those of its edits that are new. */
interface Taken extends Batch {
	epoch: string;
	seq: number;
	at: Date;
}

/**
 * Stores edits in one transaction, in order, and returns after its commit. An edit whose id the note
 * already has is not stored again, so an append that may or may not have been committed can be repeated. Throws
 * AppError `conflict` where edits carry client ids of somebody else (`details.ids`), `unavailable` where the database
 * would not keep them through a crash; nothing is stored then.
 */
export async function append(noteId: string, edits: readonly Edit[]): Promise<Appended> {
	const outcome = (await appendAll([{ noteId, edits }], { waiting: true })).get(noteId);
	if (!outcome) throw new AppError('notFound', 'This note does not exist.');
	if (outcome instanceof AppError) throw outcome;
	return outcome;
}

/**
 * Stores edits of several notes, each at most once, in one transaction; what would make `append` throw is a note's
 * outcome here. Notes that do not exist have none, nor have those that somebody else has locked unless it is `waiting`.
 */
export async function appendAll(
	batches: readonly Batch[],
	{ waiting = false } = {},
): Promise<Map<string, Appended | AppError>> {
	try {
		return await attempt(batches, waiting, noneKnown);
	} catch (error) {
		// Hardly any edit comes again: only where one did is it worth asking which.
		if (!isRepeated(error)) throw error;
		return attempt(batches, waiting, knownOf);
	}
}

async function attempt(
	batches: readonly Batch[],
	waiting: boolean,
	readKnown: typeof knownOf,
): Promise<Map<string, Appended | AppError>> {
	return db().transaction(async (tx) => {
		const taken = await take(tx, batches, waiting, readKnown);
		const outcomes = new Map<string, Appended | AppError>();
		for (const { noteId, seq, at } of taken) outcomes.set(noteId, { seq, first: undefined, at });
		const { claims, wrong } = await clients.claimsOf(tx, taken);
		for (const [noteId, ids] of wrong) outcomes.set(noteId, conflict(ids));
		const fresh = taken.filter(({ noteId, edits }) => edits.length > 0 && !wrong.has(noteId));
		if (fresh.length === 0) return outcomes;
		const at = new Date();
		for (const { noteId, seq, edits } of fresh) {
			outcomes.set(noteId, { seq: seq + edits.length, first: seq + 1, at });
		}
		await store(tx, fresh, { claims, at });
		return outcomes;
	});
}

/** Whether a statement failed because the log has one of its edits already. */
function isRepeated(error: unknown): boolean {
	const cause = error instanceof Error ? error.cause : undefined;
	return cause instanceof DatabaseError && cause.constraint === 'note_update_once';
}

function conflict(ids: string[]): AppError {
	return new AppError('conflict', 'An edit was written under the client id of somebody else.', {
		details: { ids },
	});
}

/** Locks the notes, always in the same order, and leaves out what they have already. */
async function take(
	tx: Connection,
	batches: readonly Batch[],
	waiting: boolean,
	readKnown: typeof knownOf,
): Promise<Taken[]> {
	const noteIds = batches.map(({ noteId }) => noteId);
	const heads = await tx
		.select({ id: note.id, seq: note.seq, epoch: note.epoch, at: note.changedAt, weak: weakness })
		.from(note)
		.where(inArray(note.id, noteIds))
		.orderBy(note.id)
		.for('update', waiting ? {} : { skipLocked: true });
	refuseWeak(heads[0]?.weak ?? '');
	const had = await readKnown(tx, batches);
	return heads.flatMap(({ id: noteId, seq, epoch, at }) => {
		const batch = batches.find((one) => one.noteId === noteId);
		const isNew = ({ id }: Edit) => !had.has(`${noteId} ${id}`) && had.add(`${noteId} ${id}`);
		return batch ? { noteId, seq, epoch, at, edits: batch.edits.filter(isNew) } : [];
	});
}

/** Which of the edits their notes have already, as `note edit`. */
async function knownOf(tx: Connection, batches: readonly Batch[]): Promise<Set<string>> {
	const asked = batches.flatMap(({ noteId, edits }) =>
		edits.map(({ id }) => ({ note_id: noteId, client_edit_id: id })),
	);
	const { rows } = await tx.execute<{ note: string; id: string }>(sql`
		select known.note_id as note, known.client_edit_id as id
		from jsonb_to_recordset(${JSON.stringify(asked)}::jsonb) as asked (note_id uuid, client_edit_id text)
		join note_update known using (note_id, client_edit_id)`);
	return new Set(rows.map((row) => `${row.note} ${row.id}`));
}

const noneKnown = () => Promise.resolve(new Set<string>());

/** Writes everything that belongs to new edits, in one statement. */
async function store(
	tx: Connection,
	notes: readonly Taken[],
	{ claims, at }: { claims: readonly clients.Claim[]; at: Date },
): Promise<void> {
	const rows = notes.flatMap(({ noteId, seq, edits }) =>
		edits.map(({ id, personId, bytes, cells }, index) => ({
			note_id: noteId,
			seq: seq + 1 + index,
			client_edit_id: id,
			person_id: personId,
			bytes: Buffer.from(bytes).toString('base64'),
			cells,
		})),
	);
	const authors = notes.flatMap(({ noteId, seq, edits }) =>
		authorship.lastIn(edits, seq + 1).map((author) => ({
			note_id: noteId,
			cell_id: author.cellId,
			person_id: author.personId,
			seq: author.seq,
		})),
	);
	const owners = claims.map(({ noteId, clientId, personId }) => ({
		note_id: noteId,
		client_id: clientId,
		person_id: personId,
	}));
	const heads = notes.map(({ noteId, seq, edits }) => ({
		id: noteId,
		seq: seq + edits.length,
		person_id: edits.at(-1)?.personId,
	}));
	const json = (list: readonly object[]) => sql`${JSON.stringify(list)}::jsonb`;
	const time = sql`${at.toISOString()}::timestamptz`;
	await tx.execute(sql`
		with stored as (
			insert into "note_update" (note_id, seq, client_edit_id, person_id, at, bytes, cells)
			select note_id, seq, client_edit_id, person_id, ${time}, decode(bytes, 'base64'), cells
			from jsonb_to_recordset(${json(rows)})
				as (note_id uuid, seq bigint, client_edit_id text, person_id text, bytes text, cells text[])
		), claimed as (
			insert into note_client (note_id, client_id, person_id)
			select * from jsonb_to_recordset(${json(owners)}) as (note_id uuid, client_id bigint, person_id text)
		), authored as (
			insert into cell_author (note_id, cell_id, person_id, seq, at)
			select note_id, cell_id, person_id, seq, ${time}
			from jsonb_to_recordset(${json(authors)}) as (note_id uuid, cell_id text, person_id text, seq bigint)
			on conflict (note_id, cell_id) do update
			set person_id = excluded.person_id, seq = excluded.seq, at = excluded.at
		)
		update note set seq = head.seq, changed_at = ${time}, changed_by = head.person_id
		from jsonb_to_recordset(${json(heads)}) as head (id uuid, seq bigint, person_id text)
		where note.id = head.id`);
}
