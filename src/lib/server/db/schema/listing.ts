import type { NoteContent } from '$lib/note/document';
import type { NoteState } from '$lib/schemas/notes';
import { sql } from 'drizzle-orm';
import { boolean, integer, jsonb, pgView, text, timestamp, uuid } from 'drizzle-orm/pg-core';

/** Where each note stands, derived from its candidates, sign-offs and revisions. */
export const noteStanding = pgView('note_standing', {
	noteId: uuid('note_id').notNull(),
	state: text('state').$type<NoteState>().notNull(),
	/** Letter and candidate of the last frozen revision. */
	letter: text('letter'),
	frozenCandidateId: uuid('frozen_candidate_id'),
	frozenAt: timestamp('frozen_at', { withTimezone: true }),
	/** Whether the last frozen revision was withdrawn. */
	withdrawn: boolean('withdrawn').notNull(),
	revisions: integer('revisions').notNull(),
}).as(sql`
select n.id as note_id,
	case
		when c.id is not null and not c.frozen then
			case when c.returned then 'returned' when c.checked then 'checked' else 'in check' end
		when r.seq = n.seq then case when w.revision_id is null then 'frozen' else 'withdrawn' end
		else 'draft'
	end as state,
	r.letter, r.candidate_id as frozen_candidate_id, r.frozen_at, w.revision_id is not null as withdrawn,
	(select count(*)::int from revision v where v.note_id = n.id) as revisions
from note n
left join lateral (
	select v.id, v.letter, v.candidate_id, v.frozen_at, f.seq
	from revision v join candidate f on f.id = v.candidate_id
	where v.note_id = n.id order by f.ordinal desc limit 1
) r on true
left join withdrawal w on w.revision_id = r.id
left join sign_off_policy p on p.team_id = n.team_id
left join lateral (
	select c.id,
		exists (select from revision v where v.candidate_id = c.id) as frozen,
		exists (select from sign_off s where s.candidate_id = c.id and s.meaning = 'returned') as returned,
		(select count(*) from sign_off s where s.candidate_id = c.id and s.meaning = 'checked')
			>= coalesce(p.checkers, 1) as checked
	from candidate c where c.note_id = n.id order by c.ordinal desc limit 1
) c on true`);

const row = {
	teamId: uuid('team_id').notNull(),
	number: integer('number').notNull(),
	/** MN-014 */
	written: text('written').notNull(),
	title: text('title').notNull(),
	state: text('state').$type<NoteState>().notNull(),
	letter: text('letter'),
	revisions: integer('revisions').notNull(),
	met: integer('met').notNull(),
	notMet: integer('not_met').notNull(),
	undecided: integer('undecided').notNull(),
	faults: integer('faults').notNull(),
	changedAt: timestamp('changed_at', { withTimezone: true }).notNull(),
	changedBy: text('changed_by').notNull(),
	content: jsonb('content').$type<NoteContent>(),
};

const written = sql`t.note_prefix || '-' || lpad(n.number::text, greatest(3, length(n.number::text)), '0')`;

/** Notes as those who work on them see them: the working copy's title, figures and last change. */
export const workingList = pgView('working_list', row).as(sql`
select n.team_id, n.number, ${written} as written, n.title, s.state, s.letter, s.revisions,
	coalesce(e.met, 0) as met, coalesce(e.not_met, 0) as not_met,
	coalesce(e.undecided, 0) as undecided, coalesce(e.faults, 0) as faults,
	n.changed_at, p.name as changed_by, e.content
from note n
join team t on t.id = n.team_id
join note_standing s on s.note_id = n.id
join person p on p.id = n.changed_by
left join evaluation e on e.note_id = n.id`);

/** Notes as readers see them: those with a frozen revision, and nothing younger than it. */
export const frozenList = pgView('frozen_list', row).as(sql`
select n.team_id, n.number, ${written} as written, c.content->>'title' as title,
	case when s.withdrawn then 'withdrawn' else 'frozen' end as state, s.letter, s.revisions,
	v.met, v.not_met, v.undecided, 0 as faults,
	s.frozen_at as changed_at, a.person_name as changed_by, c.content
from note n
join team t on t.id = n.team_id
join note_standing s on s.note_id = n.id
join candidate c on c.id = s.frozen_candidate_id
join sign_off a on a.candidate_id = c.id and a.meaning = 'approved'
cross join lateral (
	select count(*) filter (where r->>'verdict' = 'met')::int as met,
		count(*) filter (where r->>'verdict' = 'not met')::int as not_met,
		count(*) filter (where r->>'verdict' = 'undecided')::int as undecided
	from jsonb_array_elements(c.results->'requirements') r
) v`);
