CREATE TABLE "kept_trial" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"note_id" uuid NOT NULL,
	"person_id" text NOT NULL,
	"title" text NOT NULL,
	"changes" jsonb NOT NULL,
	"at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
ALTER TABLE "comment" ADD COLUMN "trial" jsonb;--> statement-breakpoint
ALTER TABLE "kept_trial" ADD CONSTRAINT "kept_trial_note_id_note_id_fk" FOREIGN KEY ("note_id") REFERENCES "public"."note"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "kept_trial" ADD CONSTRAINT "kept_trial_person_id_person_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."person"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "kept_trial_person" ON "kept_trial" USING btree ("note_id","person_id","at");