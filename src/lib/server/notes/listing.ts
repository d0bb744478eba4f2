import { letterOf } from '../revisions/letters';
import type { ListQuery, NoteRow } from '$lib/schemas/notes';
import { may } from '$lib/schemas/role';
import { and, asc, desc, eq, gt, sql, type SQL } from 'drizzle-orm';
import { demand, type Actor } from '../auth/access';
import { db } from '../db/client';
import { frozenList, workingList } from '../db/schema/listing';

type List = typeof workingList | typeof frozenList;

/** The team's notes, filtered, searched and sorted by the database. Readers get frozen figures of frozen notes only. */
export async function list(actor: Actor, query: ListQuery): Promise<NoteRow[]> {
	demand(actor, 'readFrozen');
	const from = may(actor.role, 'readWorkingCopy') ? workingList : frozenList;
	const direction = query.order === 'asc' ? asc : desc;
	const rows = await db()
		.select()
		.from(from)
		.where(and(eq(from.teamId, actor.teamId), stateIs(from, query.state), ...words(from, query.q)))
		// Notes that are alike stand by number, turned round with the rest.
		.orderBy(...[...sortKeys(from, query.sort), from.number].map((key) => direction(key)))
		.limit(1000);
	return rows.map((row) => ({
		number: row.written,
		title: row.title,
		state: row.state,
		revision: row.letter,
		nextLetter: letterOf(row.revisions + 1),
		requirements: { met: row.met, notMet: row.notMet, undecided: row.undecided },
		faults: row.faults,
		changedAt: row.changedAt.toISOString(),
		changedBy: row.changedBy,
	}));
}

function stateIs(from: List, state: ListQuery['state']): SQL | undefined {
	if (state === 'all') return undefined;
	return state === 'not met' ? gt(from.notMet, 0) : eq(from.state, state);
}

/** Each word must occur in the number, the title or a cell's source, where quantities have their names. */
function words(from: List, q: string): SQL[] {
	return q
		.split(/\s+/)
		.filter((word) => word !== '')
		.map((word) => {
			const like = `%${word.replace(/[\\%_]/g, '\\$&')}%`;
			return sql`(${from.written} ilike ${like} or ${from.title} ilike ${like} or exists (
				select from jsonb_array_elements(${from.content}->'cells') cell
				where cell->>'source' ilike ${like}))`;
		});
}

/** Keys in order of weight; all follow the chosen direction. */
function sortKeys(from: List, sort: ListQuery['sort']): SQL[] {
	switch (sort) {
		case 'number':
			return [sql`${from.number}`];
		case 'title':
			return [sql`lower(${from.title})`];
		case 'state':
			return [
				sql`array_position(array['draft', 'returned', 'in check', 'checked', 'frozen', 'withdrawn'], ${from.state})`,
			];
		case 'revision':
			return [sql`${from.revisions}`];
		case 'requirements':
			return [sql`${from.notMet}`, sql`${from.undecided}`, sql`${from.met}`];
		case 'changed':
			return [sql`${from.changedAt}`];
	}
}
