CREATE TABLE "cell_author" (
	"note_id" uuid NOT NULL,
	"cell_id" text NOT NULL,
	"person_id" text NOT NULL,
	"seq" bigint NOT NULL,
	"at" timestamp with time zone NOT NULL,
	CONSTRAINT "cell_author_note_id_cell_id_pk" PRIMARY KEY("note_id","cell_id")
);
--> statement-breakpoint
CREATE TABLE "note_client" (
	"note_id" uuid NOT NULL,
	"client_id" bigint NOT NULL,
	"person_id" text NOT NULL,
	CONSTRAINT "note_client_note_id_client_id_pk" PRIMARY KEY("note_id","client_id")
);
--> statement-breakpoint
CREATE TABLE "note_snapshot" (
	"note_id" uuid NOT NULL,
	"seq" bigint NOT NULL,
	"state" "bytea" NOT NULL,
	"at" timestamp with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "note_snapshot_note_id_seq_pk" PRIMARY KEY("note_id","seq")
);
--> statement-breakpoint
ALTER TABLE "note_update" ADD COLUMN "cells" text[] DEFAULT '{}' NOT NULL;--> statement-breakpoint
ALTER TABLE "note_update" ADD COLUMN "edits" integer DEFAULT 1 NOT NULL;--> statement-breakpoint
ALTER TABLE "note_update" ADD COLUMN "first_seq" bigint;--> statement-breakpoint
ALTER TABLE "note_update" ADD COLUMN "first_at" timestamp with time zone;--> statement-breakpoint
ALTER TABLE "cell_author" ADD CONSTRAINT "cell_author_note_id_note_id_fk" FOREIGN KEY ("note_id") REFERENCES "public"."note"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "cell_author" ADD CONSTRAINT "cell_author_person_id_person_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."person"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "note_client" ADD CONSTRAINT "note_client_note_id_note_id_fk" FOREIGN KEY ("note_id") REFERENCES "public"."note"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "note_client" ADD CONSTRAINT "note_client_person_id_person_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."person"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "note_snapshot" ADD CONSTRAINT "note_snapshot_note_id_note_id_fk" FOREIGN KEY ("note_id") REFERENCES "public"."note"("id") ON DELETE no action ON UPDATE no action;