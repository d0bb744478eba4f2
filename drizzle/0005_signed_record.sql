CREATE TABLE "audit_link" (
	"position" bigint PRIMARY KEY NOT NULL,
	"event_id" bigint NOT NULL,
	"hash" text NOT NULL,
	CONSTRAINT "audit_link_event_id_unique" UNIQUE("event_id")
);
--> statement-breakpoint
CREATE TABLE "checkpoint" (
	"size" bigint PRIMARY KEY NOT NULL,
	"note" text NOT NULL,
	"peaks" jsonb NOT NULL,
	"at" timestamp with time zone NOT NULL
);
--> statement-breakpoint
CREATE TABLE "signed_entry" (
	"index" bigint PRIMARY KEY NOT NULL,
	"kind" text NOT NULL,
	"statement" text NOT NULL,
	"key_id" text NOT NULL,
	"signature" text NOT NULL,
	"hash" text NOT NULL
);
--> statement-breakpoint
CREATE TABLE "sign_off_policy" (
	"team_id" uuid PRIMARY KEY NOT NULL,
	"checkers" integer DEFAULT 1 NOT NULL,
	"authors_may_check" boolean DEFAULT false NOT NULL,
	"authors_may_approve" boolean DEFAULT false NOT NULL,
	"checkers_may_approve" boolean DEFAULT false NOT NULL,
	"undecided_blocks" boolean DEFAULT false NOT NULL,
	"comments_block" boolean DEFAULT false NOT NULL,
	"waivers" boolean DEFAULT false NOT NULL,
	"identify_after_minutes" integer DEFAULT 480 NOT NULL
);
--> statement-breakpoint
CREATE TABLE "withdrawal" (
	"revision_id" uuid PRIMARY KEY NOT NULL,
	"person_id" text NOT NULL,
	"person_name" text NOT NULL,
	"role" text NOT NULL,
	"reason" text NOT NULL,
	"method" text NOT NULL,
	"digest" text NOT NULL,
	"entry" bigint NOT NULL,
	"at" timestamp with time zone NOT NULL
);
--> statement-breakpoint
DROP VIEW "public"."frozen_list";--> statement-breakpoint
DROP VIEW "public"."working_list";--> statement-breakpoint
DROP VIEW "public"."note_standing";--> statement-breakpoint
ALTER TABLE "sign_off" DROP CONSTRAINT "sign_off_once";--> statement-breakpoint
ALTER TABLE "candidate" ADD COLUMN "details" jsonb;--> statement-breakpoint
ALTER TABLE "revision" ADD COLUMN "entry" bigint;--> statement-breakpoint
ALTER TABLE "sign_off" ADD COLUMN "details" jsonb DEFAULT '{}'::jsonb NOT NULL;--> statement-breakpoint
ALTER TABLE "sign_off" ADD COLUMN "entry" bigint;--> statement-breakpoint
ALTER TABLE "sign_off_policy" ADD CONSTRAINT "sign_off_policy_team_id_team_id_fk" FOREIGN KEY ("team_id") REFERENCES "public"."team"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "withdrawal" ADD CONSTRAINT "withdrawal_revision_id_revision_id_fk" FOREIGN KEY ("revision_id") REFERENCES "public"."revision"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "withdrawal" ADD CONSTRAINT "withdrawal_person_id_person_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."person"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
CREATE UNIQUE INDEX "sign_off_one" ON "sign_off" USING btree ("candidate_id","meaning") WHERE "sign_off"."meaning" <> 'checked';--> statement-breakpoint
ALTER TABLE "sign_off" ADD CONSTRAINT "sign_off_person" UNIQUE("candidate_id","meaning","person_id");--> statement-breakpoint
CREATE VIEW "public"."note_standing" AS (
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
) c on true);--> statement-breakpoint
CREATE VIEW "public"."frozen_list" AS (
select n.team_id, n.number, t.note_prefix || '-' || lpad(n.number::text, greatest(3, length(n.number::text)), '0') as written, c.content->>'title' as title,
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
left join evaluation e on e.note_id = n.id);--> statement-breakpoint
CREATE TRIGGER permanent BEFORE UPDATE OR DELETE OR TRUNCATE ON "withdrawal" FOR EACH STATEMENT EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
ALTER TABLE "withdrawal" ENABLE ALWAYS TRIGGER permanent;
--> statement-breakpoint
CREATE TRIGGER permanent BEFORE UPDATE OR DELETE OR TRUNCATE ON "signed_entry" FOR EACH STATEMENT EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
ALTER TABLE "signed_entry" ENABLE ALWAYS TRIGGER permanent;
--> statement-breakpoint
CREATE TRIGGER permanent BEFORE UPDATE OR DELETE OR TRUNCATE ON "checkpoint" FOR EACH STATEMENT EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
ALTER TABLE "checkpoint" ENABLE ALWAYS TRIGGER permanent;
--> statement-breakpoint
CREATE TRIGGER permanent BEFORE UPDATE OR DELETE OR TRUNCATE ON "audit_link" FOR EACH STATEMENT EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
ALTER TABLE "audit_link" ENABLE ALWAYS TRIGGER permanent;
--> statement-breakpoint
-- The one clock that dates signatures, whichever process makes them.
CREATE FUNCTION signing_time() RETURNS timestamptz LANGUAGE sql VOLATILE AS $$ SELECT clock_timestamp() $$;
--> statement-breakpoint
-- An event as it is chained and exported: jsonb writes its members in a fixed order.
CREATE FUNCTION audit_text(e audit_event) RETURNS text LANGUAGE sql STABLE AS $$
	SELECT jsonb_build_object('id', e.id, 'team', e.team_id, 'person', e.person_id, 'action', e.action,
		'subject', e.subject, 'before', e.before, 'after', e.after, 'reason', e.reason,
		'at', to_char(e.at AT TIME ZONE 'UTC', 'YYYY-MM-DD"T"HH24:MI:SS.US"Z"'))::text
$$;
--> statement-breakpoint
-- Runs when a transaction commits, so that the chain is locked for that moment only and follows the order of commits.
-- The application's role may not write links itself.
CREATE FUNCTION link_audit() RETURNS trigger LANGUAGE plpgsql SECURITY DEFINER SET search_path = public, pg_temp AS $$
DECLARE
	last record;
BEGIN
	PERFORM pg_advisory_xact_lock(hashtextextended('audit trail', 0));
	SELECT "position", hash INTO last FROM audit_link ORDER BY "position" DESC LIMIT 1;
	INSERT INTO audit_link ("position", event_id, hash) VALUES (
		coalesce(last."position", 0) + 1, NEW.id,
		encode(sha256(convert_to(coalesce(last.hash, '') || audit_text(NEW), 'UTF8')), 'hex'));
	RETURN NULL;
END $$;
--> statement-breakpoint
DO $$
DECLARE
	event audit_event;
	before text := '';
	place bigint := 0;
BEGIN
	FOR event IN SELECT * FROM audit_event ORDER BY id LOOP
		place := place + 1;
		before := encode(sha256(convert_to(before || audit_text(event), 'UTF8')), 'hex');
		INSERT INTO audit_link ("position", event_id, hash) VALUES (place, event.id, before);
	END LOOP;
END $$;
--> statement-breakpoint
CREATE CONSTRAINT TRIGGER chained AFTER INSERT ON "audit_event" DEFERRABLE INITIALLY DEFERRED
	FOR EACH ROW EXECUTE FUNCTION link_audit();
--> statement-breakpoint
ALTER TABLE "audit_event" ENABLE ALWAYS TRIGGER chained;
