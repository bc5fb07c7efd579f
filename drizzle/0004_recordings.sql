CREATE TABLE "fits" (
	"fit_id" uuid PRIMARY KEY NOT NULL,
	"recording_id" uuid NOT NULL,
	"revision" integer NOT NULL,
	"settings" jsonb NOT NULL,
	"result" jsonb NOT NULL,
	"digest" text NOT NULL,
	"saved_by" uuid NOT NULL,
	"saved_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "fits_digest" CHECK ("fits"."digest" ~ '^[0-9a-f]{64}$')
);
--> statement-breakpoint
CREATE TABLE "mappings" (
	"bench_id" uuid NOT NULL,
	"shape" text NOT NULL,
	"choices" jsonb NOT NULL,
	"saved_by" uuid NOT NULL,
	"saved_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "mappings_bench_id_shape_pk" PRIMARY KEY("bench_id","shape")
);
--> statement-breakpoint
CREATE TABLE "recording_points" (
	"recording_id" uuid NOT NULL,
	"position" integer NOT NULL,
	"cell" text,
	"interval_ms" double precision NOT NULL,
	"ratio" double precision,
	"sd" double precision,
	"sem" double precision,
	"n" integer,
	"first" double precision,
	"aside" text,
	"line" integer,
	CONSTRAINT "recording_points_recording_id_position_pk" PRIMARY KEY("recording_id","position"),
	CONSTRAINT "recording_points_interval" CHECK ("recording_points"."interval_ms" >= 0),
	CONSTRAINT "recording_points_n" CHECK ("recording_points"."n" is null or "recording_points"."n" >= 1),
	CONSTRAINT "recording_points_error" CHECK (("recording_points"."sd" is null or "recording_points"."sd" >= 0) and ("recording_points"."sem" is null or "recording_points"."sem" >= 0)),
	CONSTRAINT "recording_points_aside" CHECK ("recording_points"."aside" is null or char_length("recording_points"."aside") between 1 and 200)
);
--> statement-breakpoint
CREATE TABLE "recording_tags" (
	"recording_id" uuid NOT NULL,
	"tag" text NOT NULL,
	CONSTRAINT "recording_tags_recording_id_tag_pk" PRIMARY KEY("recording_id","tag"),
	CONSTRAINT "recording_tags_length" CHECK (char_length("recording_tags"."tag") between 1 and 40)
);
--> statement-breakpoint
CREATE TABLE "recordings" (
	"recording_id" uuid PRIMARY KEY NOT NULL,
	"bench_id" uuid NOT NULL,
	"upload_id" uuid NOT NULL,
	"title" text NOT NULL,
	"condition" text NOT NULL,
	"protocol" text NOT NULL,
	"manipulation" text NOT NULL,
	"kind" text NOT NULL,
	"reading" jsonb NOT NULL,
	"details" jsonb NOT NULL,
	"notes" text DEFAULT '' NOT NULL,
	"revision" integer DEFAULT 1 NOT NULL,
	"created_by" uuid NOT NULL,
	"updated_by" uuid NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	"updated_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	"deleted_at" timestamp (3) with time zone,
	"deleted_by" uuid,
	CONSTRAINT "recordings_title_length" CHECK (char_length("recordings"."title") between 1 and 200),
	CONSTRAINT "recordings_kind" CHECK ("recordings"."kind" in ('summary', 'cells', 'trace')),
	CONSTRAINT "recordings_revision" CHECK ("recordings"."revision" >= 1),
	CONSTRAINT "recordings_deleted" CHECK (("recordings"."deleted_at" is null) = ("recordings"."deleted_by" is null))
);
--> statement-breakpoint
CREATE TABLE "uploads" (
	"upload_id" uuid PRIMARY KEY NOT NULL,
	"bench_id" uuid NOT NULL,
	"file_name" text NOT NULL,
	"size" integer NOT NULL,
	"sha256" text NOT NULL,
	"bytes" "bytea" NOT NULL,
	"uploaded_by" uuid NOT NULL,
	"uploaded_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "uploads_size" CHECK ("uploads"."size" between 1 and 26214400 and octet_length("uploads"."bytes") = "uploads"."size"),
	CONSTRAINT "uploads_hash" CHECK ("uploads"."sha256" ~ '^[0-9a-f]{64}$'),
	CONSTRAINT "uploads_name_length" CHECK (char_length("uploads"."file_name") between 1 and 255)
);
--> statement-breakpoint
CREATE TABLE "weigh_up_versions" (
	"weigh_up_id" uuid NOT NULL,
	"version" integer NOT NULL,
	"inputs" jsonb NOT NULL,
	"data" jsonb NOT NULL,
	"settings" jsonb NOT NULL,
	"result" jsonb NOT NULL,
	"digest" text NOT NULL,
	"saved_by" uuid NOT NULL,
	"saved_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "weigh_up_versions_weigh_up_id_version_pk" PRIMARY KEY("weigh_up_id","version"),
	CONSTRAINT "weigh_up_versions_version" CHECK ("weigh_up_versions"."version" >= 1),
	CONSTRAINT "weigh_up_versions_digest" CHECK ("weigh_up_versions"."digest" ~ '^[0-9a-f]{64}$')
);
--> statement-breakpoint
CREATE TABLE "weigh_ups" (
	"weigh_up_id" uuid PRIMARY KEY NOT NULL,
	"bench_id" uuid NOT NULL,
	"number" integer NOT NULL,
	"title" text NOT NULL,
	"version" integer NOT NULL,
	"created_by" uuid NOT NULL,
	"updated_by" uuid NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	"updated_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	"deleted_at" timestamp (3) with time zone,
	"deleted_by" uuid,
	CONSTRAINT "weigh_ups_number_unique" UNIQUE("bench_id","number"),
	CONSTRAINT "weigh_ups_title_length" CHECK (char_length("weigh_ups"."title") between 1 and 200),
	CONSTRAINT "weigh_ups_deleted" CHECK (("weigh_ups"."deleted_at" is null) = ("weigh_ups"."deleted_by" is null))
);
--> statement-breakpoint
ALTER TABLE "audit_events" ADD COLUMN "recording_id" uuid;--> statement-breakpoint
ALTER TABLE "audit_events" ADD COLUMN "weigh_up_id" uuid;--> statement-breakpoint
ALTER TABLE "benches" ADD COLUMN "weigh_ups_numbered" integer DEFAULT 0 NOT NULL;--> statement-breakpoint
ALTER TABLE "fits" ADD CONSTRAINT "fits_recording_id_recordings_recording_id_fk" FOREIGN KEY ("recording_id") REFERENCES "public"."recordings"("recording_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "fits" ADD CONSTRAINT "fits_saved_by_users_user_id_fk" FOREIGN KEY ("saved_by") REFERENCES "public"."users"("user_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "mappings" ADD CONSTRAINT "mappings_bench_id_benches_bench_id_fk" FOREIGN KEY ("bench_id") REFERENCES "public"."benches"("bench_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "mappings" ADD CONSTRAINT "mappings_saved_by_users_user_id_fk" FOREIGN KEY ("saved_by") REFERENCES "public"."users"("user_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "recording_points" ADD CONSTRAINT "recording_points_recording_id_recordings_recording_id_fk" FOREIGN KEY ("recording_id") REFERENCES "public"."recordings"("recording_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "recording_tags" ADD CONSTRAINT "recording_tags_recording_id_recordings_recording_id_fk" FOREIGN KEY ("recording_id") REFERENCES "public"."recordings"("recording_id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "recordings" ADD CONSTRAINT "recordings_bench_id_benches_bench_id_fk" FOREIGN KEY ("bench_id") REFERENCES "public"."benches"("bench_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "recordings" ADD CONSTRAINT "recordings_upload_id_uploads_upload_id_fk" FOREIGN KEY ("upload_id") REFERENCES "public"."uploads"("upload_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "recordings" ADD CONSTRAINT "recordings_created_by_users_user_id_fk" FOREIGN KEY ("created_by") REFERENCES "public"."users"("user_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "recordings" ADD CONSTRAINT "recordings_updated_by_users_user_id_fk" FOREIGN KEY ("updated_by") REFERENCES "public"."users"("user_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "recordings" ADD CONSTRAINT "recordings_deleted_by_users_user_id_fk" FOREIGN KEY ("deleted_by") REFERENCES "public"."users"("user_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "uploads" ADD CONSTRAINT "uploads_bench_id_benches_bench_id_fk" FOREIGN KEY ("bench_id") REFERENCES "public"."benches"("bench_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "uploads" ADD CONSTRAINT "uploads_uploaded_by_users_user_id_fk" FOREIGN KEY ("uploaded_by") REFERENCES "public"."users"("user_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "weigh_up_versions" ADD CONSTRAINT "weigh_up_versions_weigh_up_id_weigh_ups_weigh_up_id_fk" FOREIGN KEY ("weigh_up_id") REFERENCES "public"."weigh_ups"("weigh_up_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "weigh_up_versions" ADD CONSTRAINT "weigh_up_versions_saved_by_users_user_id_fk" FOREIGN KEY ("saved_by") REFERENCES "public"."users"("user_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "weigh_ups" ADD CONSTRAINT "weigh_ups_bench_id_benches_bench_id_fk" FOREIGN KEY ("bench_id") REFERENCES "public"."benches"("bench_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "weigh_ups" ADD CONSTRAINT "weigh_ups_created_by_users_user_id_fk" FOREIGN KEY ("created_by") REFERENCES "public"."users"("user_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "weigh_ups" ADD CONSTRAINT "weigh_ups_updated_by_users_user_id_fk" FOREIGN KEY ("updated_by") REFERENCES "public"."users"("user_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "weigh_ups" ADD CONSTRAINT "weigh_ups_deleted_by_users_user_id_fk" FOREIGN KEY ("deleted_by") REFERENCES "public"."users"("user_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "fits_recording_index" ON "fits" USING btree ("recording_id","saved_at");--> statement-breakpoint
CREATE INDEX "recordings_updated_index" ON "recordings" USING btree ("bench_id","updated_at","recording_id");--> statement-breakpoint
CREATE INDEX "uploads_hash_index" ON "uploads" USING btree ("bench_id","sha256");--> statement-breakpoint
CREATE INDEX "weigh_ups_updated_index" ON "weigh_ups" USING btree ("bench_id","updated_at","weigh_up_id");--> statement-breakpoint
ALTER TABLE "audit_events" ADD CONSTRAINT "audit_events_recording_id_recordings_recording_id_fk" FOREIGN KEY ("recording_id") REFERENCES "public"."recordings"("recording_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "audit_events" ADD CONSTRAINT "audit_events_weigh_up_id_weigh_ups_weigh_up_id_fk" FOREIGN KEY ("weigh_up_id") REFERENCES "public"."weigh_ups"("weigh_up_id") ON DELETE no action ON UPDATE no action;