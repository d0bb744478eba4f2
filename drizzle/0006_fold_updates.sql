-- Updates stay permanent, with one exception: `fold_updates` replaces a stretch of old rows by one row per author,
-- which holds the same edits. A snapshot at or behind the stretch must exist, no candidate may end inside it, and
-- nobody's edits may be left out. Times, cells and the number of edits it takes from the rows themselves.
CREATE FUNCTION refuse_change_but_folding() RETURNS trigger LANGUAGE plpgsql AS $$
DECLARE
	calls text;
BEGIN
	GET DIAGNOSTICS calls = PG_CONTEXT;
	-- The last line names who was called first, which a statement's text cannot forge. Who could make a function of
	-- this name beside ours could drop this trigger as well; any other role stays what it is in a function of its own.
	IF TG_OP = 'DELETE'
		AND current_user = (SELECT relowner::regrole::text FROM pg_class WHERE oid = TG_RELID)
		AND substring(calls FROM '[^\n]*$') ~ '(^|[ .])fold_updates\(uuid,bigint,bigint,text\[\],bytea\[\]\)'
	THEN
		RETURN NULL;
	END IF;
	RAISE EXCEPTION '% is refused: rows of "%" are permanent', TG_OP, TG_TABLE_NAME
		USING ERRCODE = 'restrict_violation', HINT = 'Add a new row instead.';
END $$;
--> statement-breakpoint
DROP TRIGGER permanent ON "note_update";
--> statement-breakpoint
CREATE TRIGGER permanent BEFORE UPDATE OR DELETE OR TRUNCATE ON "note_update" FOR EACH STATEMENT EXECUTE FUNCTION refuse_change_but_folding();
--> statement-breakpoint
ALTER TABLE "note_update" ENABLE ALWAYS TRIGGER permanent;
--> statement-breakpoint
CREATE FUNCTION fold_updates(in_note uuid, from_seq bigint, to_seq bigint, people text[], merged bytea[])
RETURNS void LANGUAGE plpgsql SECURITY DEFINER SET search_path = public, pg_temp AS $$
DECLARE
	made bigint;
BEGIN
	IF NOT EXISTS (SELECT FROM note_snapshot s WHERE s.note_id = in_note AND s.seq >= to_seq) THEN
		RAISE EXCEPTION 'no snapshot covers the stretch' USING ERRCODE = 'restrict_violation';
	END IF;
	IF EXISTS (SELECT FROM candidate c WHERE c.note_id = in_note AND c.seq >= from_seq AND c.seq < to_seq) THEN
		RAISE EXCEPTION 'a candidate ends inside the stretch' USING ERRCODE = 'restrict_violation';
	END IF;

	WITH gone AS (
		DELETE FROM note_update u WHERE u.note_id = in_note AND u.seq BETWEEN from_seq AND to_seq RETURNING u.*
	), author AS (
		SELECT g.person_id, sum(g.edits)::int AS edits, min(coalesce(g.first_at, g.at)) AS first_at,
			max(g.at) AS at, max(g.seq) AS last
		FROM gone g GROUP BY g.person_id
	), touched AS (
		SELECT g.person_id, array_agg(DISTINCT cell) AS cells FROM gone g, unnest(g.cells) cell GROUP BY g.person_id
	), placed AS (
		SELECT a.*, to_seq - count(*) OVER () + row_number() OVER (ORDER BY a.last) AS seq FROM author a
	)
	INSERT INTO note_update (note_id, seq, client_edit_id, person_id, at, bytes, cells, edits, first_seq, first_at)
	SELECT in_note, p.seq, 'fold:' || p.seq, p.person_id, p.at, given.bytes, coalesce(t.cells, '{}'), p.edits,
		from_seq, p.first_at
	FROM placed p
	JOIN unnest(people, merged) AS given (person_id, bytes) ON given.person_id = p.person_id
	LEFT JOIN touched t ON t.person_id = p.person_id;
	GET DIAGNOSTICS made = ROW_COUNT;

	IF made = 0 OR made <> cardinality(people) OR to_seq - from_seq + 1 <> (
		SELECT sum(u.edits) FROM note_update u WHERE u.note_id = in_note AND u.seq BETWEEN from_seq AND to_seq
	) THEN
		RAISE EXCEPTION 'the stretch is not whole' USING ERRCODE = 'restrict_violation';
	END IF;
	-- An older snapshot may end inside the stretch, where no row does any more.
	DELETE FROM note_snapshot s WHERE s.note_id = in_note AND s.seq < to_seq;
END $$;
