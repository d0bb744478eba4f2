ALTER TABLE "evaluation" ALTER COLUMN "results" SET DATA TYPE json;
--> statement-breakpoint
ALTER TABLE "evaluation" ALTER COLUMN "results" SET COMPRESSION lz4, ALTER COLUMN "content" SET COMPRESSION lz4;
