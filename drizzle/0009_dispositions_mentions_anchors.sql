CREATE TABLE "mention" (
	"comment_id" uuid NOT NULL,
	"person_id" text NOT NULL,
	CONSTRAINT "mention_comment_id_person_id_pk" PRIMARY KEY("comment_id","person_id")
);
--> statement-breakpoint
CREATE TABLE "thread_change" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"thread_id" uuid NOT NULL,
	"person_id" text NOT NULL,
	"what" text NOT NULL,
	"at" timestamp with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
ALTER TABLE "thread" ADD COLUMN "anchor" jsonb;--> statement-breakpoint
ALTER TABLE "thread" ADD COLUMN "answered_at" timestamp with time zone;--> statement-breakpoint
ALTER TABLE "thread" ADD COLUMN "answered_by" text;--> statement-breakpoint
ALTER TABLE "mention" ADD CONSTRAINT "mention_comment_id_comment_id_fk" FOREIGN KEY ("comment_id") REFERENCES "public"."comment"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "mention" ADD CONSTRAINT "mention_person_id_person_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."person"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "thread_change" ADD CONSTRAINT "thread_change_thread_id_thread_id_fk" FOREIGN KEY ("thread_id") REFERENCES "public"."thread"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "thread_change" ADD CONSTRAINT "thread_change_person_id_person_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."person"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "mention_person" ON "mention" USING btree ("person_id");--> statement-breakpoint
CREATE INDEX "thread_change_thread" ON "thread_change" USING btree ("thread_id","at");--> statement-breakpoint
ALTER TABLE "thread" ADD CONSTRAINT "thread_answered_by_person_id_fk" FOREIGN KEY ("answered_by") REFERENCES "public"."person"("id") ON DELETE no action ON UPDATE no action;