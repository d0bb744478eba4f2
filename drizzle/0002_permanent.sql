-- What was signed, frozen or witnessed, and every update a person was told is saved, stays as it is: the database
-- itself refuses to change or remove such rows, whoever asks. ALWAYS: also where replication switches triggers off.
-- Merging old updates will need its own migration that lets exactly those rows go that a checkpoint covers.
CREATE FUNCTION refuse_change() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
	RAISE EXCEPTION '% is refused: rows of "%" are permanent', TG_OP, TG_TABLE_NAME
		USING ERRCODE = 'restrict_violation', HINT = 'Add a new row instead.';
END $$;
--> statement-breakpoint
CREATE TRIGGER permanent BEFORE UPDATE OR DELETE OR TRUNCATE ON "candidate" FOR EACH STATEMENT EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER permanent BEFORE UPDATE OR DELETE OR TRUNCATE ON "sign_off" FOR EACH STATEMENT EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER permanent BEFORE UPDATE OR DELETE OR TRUNCATE ON "revision" FOR EACH STATEMENT EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER permanent BEFORE UPDATE OR DELETE OR TRUNCATE ON "audit_event" FOR EACH STATEMENT EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER permanent BEFORE UPDATE OR DELETE OR TRUNCATE ON "note_update" FOR EACH STATEMENT EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
ALTER TABLE "candidate" ENABLE ALWAYS TRIGGER permanent;
--> statement-breakpoint
ALTER TABLE "sign_off" ENABLE ALWAYS TRIGGER permanent;
--> statement-breakpoint
ALTER TABLE "revision" ENABLE ALWAYS TRIGGER permanent;
--> statement-breakpoint
ALTER TABLE "audit_event" ENABLE ALWAYS TRIGGER permanent;
--> statement-breakpoint
ALTER TABLE "note_update" ENABLE ALWAYS TRIGGER permanent;
