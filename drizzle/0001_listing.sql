CREATE VIEW "public"."note_standing" AS (
select n.id as note_id,
	case
		when c.id is not null and not c.frozen then
			case when c.returned then 'returned' when c.checked then 'checked' else 'in check' end
		when r.seq = n.seq then 'frozen'
		else 'draft'
	end as state,
	r.letter, r.candidate_id as frozen_candidate_id, r.frozen_at,
	(select count(*)::int from revision v where v.note_id = n.id) as revisions
from note n
left join lateral (
	select v.letter, v.candidate_id, v.frozen_at, f.seq
	from revision v join candidate f on f.id = v.candidate_id
	where v.note_id = n.id order by f.ordinal desc limit 1
) r on true
left join lateral (
	select c.id,
		exists (select from revision v where v.candidate_id = c.id) as frozen,
		exists (select from sign_off s where s.candidate_id = c.id and s.meaning = 'returned') as returned,
		exists (select from sign_off s where s.candidate_id = c.id and s.meaning = 'checked') as checked
	from candidate c where c.note_id = n.id order by c.ordinal desc limit 1
) c on true);--> statement-breakpoint
CREATE VIEW "public"."frozen_list" AS (
select n.team_id, n.number, t.note_prefix || '-' || lpad(n.number::text, greatest(3, length(n.number::text)), '0') as written, c.content->>'title' as title,
	'frozen' as state, s.letter, s.revisions,
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
) v);--> statement-breakpoint
CREATE VIEW "public"."working_list" AS (
select n.team_id, n.number, t.note_prefix || '-' || lpad(n.number::text, greatest(3, length(n.number::text)), '0') as written, n.title, s.state, s.letter, s.revisions,
	coalesce(e.met, 0) as met, coalesce(e.not_met, 0) as not_met,
	coalesce(e.undecided, 0) as undecided, coalesce(e.faults, 0) as faults,
	n.changed_at, p.name as changed_by, e.content
from note n
join team t on t.id = n.team_id
join note_standing s on s.note_id = n.id
join person p on p.id = n.changed_by
left join evaluation e on e.note_id = n.id);
