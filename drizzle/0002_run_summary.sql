ALTER TABLE "runs" ADD COLUMN "summary" jsonb NOT NULL;--> statement-breakpoint
ALTER TABLE "runs" ADD COLUMN "blocks" integer NOT NULL;