CREATE TABLE "shared_link" (
	"id" uuid PRIMARY KEY DEFAULT gen_random_uuid() NOT NULL,
	"revision_id" uuid NOT NULL,
	"person_id" text NOT NULL,
	"name" text NOT NULL,
	"hash" text NOT NULL,
	"password_hash" text,
	"created_at" timestamp with time zone DEFAULT now() NOT NULL,
	"last_used_at" timestamp with time zone,
	"expires_at" timestamp with time zone,
	"revoked_at" timestamp with time zone,
	CONSTRAINT "shared_link_hash_unique" UNIQUE("hash")
);
--> statement-breakpoint
ALTER TABLE "shared_link" ADD CONSTRAINT "shared_link_revision_id_revision_id_fk" FOREIGN KEY ("revision_id") REFERENCES "public"."revision"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "shared_link" ADD CONSTRAINT "shared_link_person_id_person_id_fk" FOREIGN KEY ("person_id") REFERENCES "public"."person"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "shared_link_revision" ON "shared_link" USING btree ("revision_id","created_at");