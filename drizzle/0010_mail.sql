CREATE TABLE "mail" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"team_id" uuid NOT NULL,
	"person_id" text NOT NULL,
	"kind" text NOT NULL,
	"key" text NOT NULL,
	"said" jsonb NOT NULL,
	"state" text NOT NULL,
	"queued_at" timestamp with time zone,
	"sending_at" timestamp with time zone,
	"tries" integer DEFAULT 0 NOT NULL,
	"reason" text DEFAULT '' NOT NULL,
	"at" timestamp with time zone DEFAULT now() NOT NULL,
	"sent_at" timestamp with time zone,
	CONSTRAINT "mail_once" UNIQUE("person_id","key")
);
--> statement-breakpoint
CREATE TABLE "mail_preference" (
	"person_id" text NOT NULL,
	"kind" text NOT NULL,
	"way" text NOT NULL,
	CONSTRAINT "mail_preference_person_id_kind_pk" PRIMARY KEY("person_id","kind")
);
--> statement-breakpoint
ALTER TABLE "mail" ADD CONSTRAINT "mail_team_id_team_id_fk" FOREIGN KEY ("team_id") REFERENCES "public"."team"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "mail" ADD CONSTRAINT "mail_person_id_person_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."person"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "mail_preference" ADD CONSTRAINT "mail_preference_person_id_person_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."person"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "mail_state" ON "mail" USING btree ("state","at");--> statement-breakpoint
CREATE INDEX "mail_team" ON "mail" USING btree ("team_id","at");