import { AppError } from '$lib/errors';
import { toContent } from '$lib/note/document';
import type { Moment, WorkSession } from '$lib/schemas/history';
import { sql } from 'drizzle-orm';
import { demand, type Actor } from '../auth/access';
import { db } from '../db/client';
import { optionsOf } from '../evaluation/note-options';
import { evaluateInChild } from '../evaluation/pool';
import * as notes from './notes';
import { documentOf, readState } from './stored-log';
import { sessionPauseMs } from './stretches';

/** Sessions that a timeline tells of. */
const most = 500;

/** The sessions of work on a note's working copy, the newest first. */
export async function sessions(actor: Actor, number: string): Promise<WorkSession[]> {
	demand(actor, 'readWorkingCopy');
	const { id } = await notes.get(actor, number);
	const { rows } = await db().execute<SessionRow>(sql`
		with update as (
			select person_id, seq, coalesce(first_seq, seq) as first_seq, coalesce(first_at, at) as first_at,
				at, edits, cells, lag(at) over (partition by person_id order by seq) as before
			from note_update where note_id = ${id}
		), numbered as (
			select *, count(*) filter (where before is null or abs(extract(epoch from first_at - before)) * 1000 > ${sessionPauseMs})
				over (partition by person_id order by seq) as session
			from update
		), touched as (
			select person_id, session, array_agg(distinct cell) as cells
			from numbered, unnest(cells) as cell group by person_id, session
		)
		select n.person_id, p.name, min(n.first_at) as "from", max(n.at) as "to",
			min(n.first_seq)::int as first_seq, max(n.seq)::int as seq, sum(n.edits)::int as edits,
			coalesce(t.cells, '{}') as cells
		from numbered n
		join person p on p.id = n.person_id
		left join touched t on t.person_id = n.person_id and t.session = n.session
		group by n.person_id, p.name, n.session, t.cells
		order by max(n.seq) desc limit ${most}`);
	return rows.map((row) => ({
		person: { id: row.person_id, name: row.name },
		from: iso(row.from),
		to: iso(row.to),
		firstSeq: row.first_seq,
		seq: row.seq,
		edits: row.edits,
		cells: row.cells,
	}));
}

type SessionRow = {
	person_id: string;
	name: string;
	from: string;
	to: string;
	first_seq: number;
	seq: number;
	edits: number;
	cells: string[];
};

/** What a note said at a sequence number, with its results and who had written it. */
export async function at(actor: Actor, number: string, seq: number): Promise<Moment> {
	demand(actor, 'readWorkingCopy');
	const { id, seq: newest } = await notes.get(actor, number);
	if (seq > newest) throw new AppError('notFound', 'The note has no such moment.');
	const { state, authors, last } = await db().transaction(
		async (tx) => {
			const state = await readState(tx, id, seq);
			const { rows: authors } = await tx.execute<AuthorRow>(sql`
				select distinct on (cell) cell, u.person_id, p.name, u.at
				from note_update u
				join person p on p.id = u.person_id, unnest(u.cells) as cell
				where u.note_id = ${id} and u.seq <= ${state.seq}
				order by cell, u.seq desc`);
			const { rows: last } = await tx.execute<AuthorRow>(sql`
				select u.person_id, p.name, u.at from note_update u join person p on p.id = u.person_id
				where u.note_id = ${id} and u.seq = ${state.seq}`);
			return { state, authors, last: last[0] };
		},
		{ isolationLevel: 'repeatable read', accessMode: 'read only' },
	);
	if (!last) throw new AppError('notFound', 'The note has no such moment.');
	const doc = documentOf(state);
	const content = toContent(doc);
	doc.destroy();
	return {
		seq: state.seq,
		by: { id: last.person_id, name: last.name },
		at: iso(last.at),
		content,
		results: await evaluateInChild(content.cells, optionsOf(content)),
		authors: Object.fromEntries(
			authors.map((row) => [
				row.cell,
				{ personId: row.person_id, name: row.name, at: iso(row.at) },
			]),
		),
	};
}

type AuthorRow = { cell: string; person_id: string; name: string; at: string };

const iso = (time: string) => new Date(time).toISOString();
