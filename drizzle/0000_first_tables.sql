CREATE TABLE "audit_events" (
	"event_id" uuid PRIMARY KEY NOT NULL,
	"kind" text NOT NULL,
	"bench_id" uuid,
	"actor_id" uuid,
	"scenario_id" uuid,
	"revision" integer,
	"run_id" uuid,
	"subject_id" uuid,
	"note" text DEFAULT '' NOT NULL,
	"at" timestamp (3) with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "benches" (
	"bench_id" uuid PRIMARY KEY NOT NULL,
	"name" text NOT NULL,
	"created_by" uuid NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	"runs_numbered" integer DEFAULT 0 NOT NULL,
	CONSTRAINT "benches_name_length" CHECK (char_length("benches"."name") between 1 and 120),
	CONSTRAINT "benches_runs_numbered" CHECK ("benches"."runs_numbered" >= 0)
);
--> statement-breakpoint
CREATE TABLE "memberships" (
	"bench_id" uuid NOT NULL,
	"user_id" uuid NOT NULL,
	"role" text NOT NULL,
	"since" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "memberships_bench_id_user_id_pk" PRIMARY KEY("bench_id","user_id"),
	CONSTRAINT "memberships_role" CHECK ("memberships"."role" in ('lead', 'member', 'trainee', 'guest'))
);
--> statement-breakpoint
CREATE TABLE "run_blocks" (
	"run_id" uuid NOT NULL,
	"position" integer NOT NULL,
	"digest" text NOT NULL,
	"block" jsonb NOT NULL,
	CONSTRAINT "run_blocks_run_id_position_pk" PRIMARY KEY("run_id","position"),
	CONSTRAINT "run_blocks_digest" CHECK ("run_blocks"."digest" ~ '^[0-9a-f]{64}$')
);
--> statement-breakpoint
CREATE TABLE "runs" (
	"run_id" uuid PRIMARY KEY NOT NULL,
	"bench_id" uuid NOT NULL,
	"number" integer NOT NULL,
	"scenario_id" uuid NOT NULL,
	"revision" integer NOT NULL,
	"seed" text NOT NULL,
	"replicates" integer NOT NULL,
	"replicates_asked" integer NOT NULL,
	"partial" boolean NOT NULL,
	"engine_version" text NOT NULL,
	"algorithm" text NOT NULL,
	"outcome" jsonb NOT NULL,
	"digest" text NOT NULL,
	"duration_ms" double precision NOT NULL,
	"workers" integer NOT NULL,
	"saved_by" uuid NOT NULL,
	"saved_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	"idempotency_key" text NOT NULL,
	"body_hash" text NOT NULL,
	"audit_state" text DEFAULT 'waiting' NOT NULL,
	"audit_blocks" integer DEFAULT 0 NOT NULL,
	"audit_detection" double precision DEFAULT 0 NOT NULL,
	"audit_at" timestamp (3) with time zone,
	"deleted_at" timestamp (3) with time zone,
	"deleted_by" uuid,
	CONSTRAINT "runs_number_unique" UNIQUE("bench_id","number"),
	CONSTRAINT "runs_idempotency_unique" UNIQUE("saved_by","scenario_id","idempotency_key"),
	CONSTRAINT "runs_replicates" CHECK ("runs"."replicates" between 1 and 50000 and "runs"."replicates_asked" >= "runs"."replicates"),
	CONSTRAINT "runs_seed_length" CHECK (char_length("runs"."seed") between 1 and 200),
	CONSTRAINT "runs_digest" CHECK ("runs"."digest" ~ '^[0-9a-f]{64}$'),
	CONSTRAINT "runs_algorithm" CHECK ("runs"."algorithm" in ('stirred', 'attempt', 'touch', 'step')),
	CONSTRAINT "runs_audit_state" CHECK ("runs"."audit_state" in ('waiting', 'audited', 'refused', 'cannot')),
	CONSTRAINT "runs_audit_detection" CHECK ("runs"."audit_detection" between 0 and 1),
	CONSTRAINT "runs_deleted" CHECK (("runs"."deleted_at" is null) = ("runs"."deleted_by" is null))
);
--> statement-breakpoint
CREATE TABLE "scenario_revisions" (
	"scenario_id" uuid NOT NULL,
	"revision" integer NOT NULL,
	"document" jsonb NOT NULL,
	"digest" text NOT NULL,
	"author_id" uuid NOT NULL,
	"message" text DEFAULT '' NOT NULL,
	"saved_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "scenario_revisions_scenario_id_revision_pk" PRIMARY KEY("scenario_id","revision"),
	CONSTRAINT "scenario_revisions_revision" CHECK ("scenario_revisions"."revision" >= 1),
	CONSTRAINT "scenario_revisions_digest" CHECK ("scenario_revisions"."digest" ~ '^[0-9a-f]{64}$'),
	CONSTRAINT "scenario_revisions_message" CHECK (char_length("scenario_revisions"."message") <= 500)
);
--> statement-breakpoint
CREATE TABLE "scenarios" (
	"scenario_id" uuid PRIMARY KEY NOT NULL,
	"bench_id" uuid NOT NULL,
	"title" text NOT NULL,
	"revision" integer NOT NULL,
	"created_by" uuid NOT NULL,
	"updated_by" uuid NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	"updated_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	"deleted_at" timestamp (3) with time zone,
	"deleted_by" uuid,
	CONSTRAINT "scenarios_title_length" CHECK (char_length("scenarios"."title") between 1 and 200),
	CONSTRAINT "scenarios_revision" CHECK ("scenarios"."revision" >= 1),
	CONSTRAINT "scenarios_deleted" CHECK (("scenarios"."deleted_at" is null) = ("scenarios"."deleted_by" is null))
);
--> statement-breakpoint
CREATE TABLE "sessions" (
	"session_id" uuid PRIMARY KEY NOT NULL,
	"user_id" uuid NOT NULL,
	"key_hash" text NOT NULL,
	"agent" text DEFAULT '' NOT NULL,
	"started_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	"last_seen_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	"expires_at" timestamp (3) with time zone NOT NULL,
	CONSTRAINT "sessions_key_unique" UNIQUE("key_hash")
);
--> statement-breakpoint
CREATE TABLE "tags" (
	"scenario_id" uuid NOT NULL,
	"tag" text NOT NULL,
	CONSTRAINT "tags_scenario_id_tag_pk" PRIMARY KEY("scenario_id","tag"),
	CONSTRAINT "tags_tag_length" CHECK (char_length("tags"."tag") between 1 and 40)
);
--> statement-breakpoint
CREATE TABLE "throttles" (
	"subject" text PRIMARY KEY NOT NULL,
	"attempts" integer DEFAULT 0 NOT NULL,
	"window_started_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "throttles_attempts" CHECK ("throttles"."attempts" >= 0)
);
--> statement-breakpoint
CREATE TABLE "users" (
	"user_id" uuid PRIMARY KEY NOT NULL,
	"mail" text NOT NULL,
	"name" text NOT NULL,
	"pass_hash" text NOT NULL,
	"failed_sign_ins" integer DEFAULT 0 NOT NULL,
	"last_failed_at" timestamp (3) with time zone,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "users_mail_unique" UNIQUE("mail"),
	CONSTRAINT "users_mail_lower" CHECK ("users"."mail" = lower("users"."mail") and char_length("users"."mail") between 3 and 254),
	CONSTRAINT "users_name_length" CHECK (char_length("users"."name") between 1 and 100)
);
--> statement-breakpoint
ALTER TABLE "audit_events" ADD CONSTRAINT "audit_events_bench_id_benches_bench_id_fk" FOREIGN KEY ("bench_id") REFERENCES "public"."benches"("bench_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "audit_events" ADD CONSTRAINT "audit_events_actor_id_users_user_id_fk" FOREIGN KEY ("actor_id") REFERENCES "public"."users"("user_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "audit_events" ADD CONSTRAINT "audit_events_scenario_id_scenarios_scenario_id_fk" FOREIGN KEY ("scenario_id") REFERENCES "public"."scenarios"("scenario_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "audit_events" ADD CONSTRAINT "audit_events_run_id_runs_run_id_fk" FOREIGN KEY ("run_id") REFERENCES "public"."runs"("run_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "audit_events" ADD CONSTRAINT "audit_events_subject_id_users_user_id_fk" FOREIGN KEY ("subject_id") REFERENCES "public"."users"("user_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "benches" ADD CONSTRAINT "benches_created_by_users_user_id_fk" FOREIGN KEY ("created_by") REFERENCES "public"."users"("user_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "memberships" ADD CONSTRAINT "memberships_bench_id_benches_bench_id_fk" FOREIGN KEY ("bench_id") REFERENCES "public"."benches"("bench_id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "memberships" ADD CONSTRAINT "memberships_user_id_users_user_id_fk" FOREIGN KEY ("user_id") REFERENCES "public"."users"("user_id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "run_blocks" ADD CONSTRAINT "run_blocks_run_id_runs_run_id_fk" FOREIGN KEY ("run_id") REFERENCES "public"."runs"("run_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "runs" ADD CONSTRAINT "runs_bench_id_benches_bench_id_fk" FOREIGN KEY ("bench_id") REFERENCES "public"."benches"("bench_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "runs" ADD CONSTRAINT "runs_saved_by_users_user_id_fk" FOREIGN KEY ("saved_by") REFERENCES "public"."users"("user_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "runs" ADD CONSTRAINT "runs_deleted_by_users_user_id_fk" FOREIGN KEY ("deleted_by") REFERENCES "public"."users"("user_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "runs" ADD CONSTRAINT "runs_revision_fk" FOREIGN KEY ("scenario_id","revision") REFERENCES "public"."scenario_revisions"("scenario_id","revision") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "scenario_revisions" ADD CONSTRAINT "scenario_revisions_scenario_id_scenarios_scenario_id_fk" FOREIGN KEY ("scenario_id") REFERENCES "public"."scenarios"("scenario_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "scenario_revisions" ADD CONSTRAINT "scenario_revisions_author_id_users_user_id_fk" FOREIGN KEY ("author_id") REFERENCES "public"."users"("user_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "scenarios" ADD CONSTRAINT "scenarios_bench_id_benches_bench_id_fk" FOREIGN KEY ("bench_id") REFERENCES "public"."benches"("bench_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "scenarios" ADD CONSTRAINT "scenarios_created_by_users_user_id_fk" FOREIGN KEY ("created_by") REFERENCES "public"."users"("user_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "scenarios" ADD CONSTRAINT "scenarios_updated_by_users_user_id_fk" FOREIGN KEY ("updated_by") REFERENCES "public"."users"("user_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "scenarios" ADD CONSTRAINT "scenarios_deleted_by_users_user_id_fk" FOREIGN KEY ("deleted_by") REFERENCES "public"."users"("user_id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "sessions" ADD CONSTRAINT "sessions_user_id_users_user_id_fk" FOREIGN KEY ("user_id") REFERENCES "public"."users"("user_id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "tags" ADD CONSTRAINT "tags_scenario_id_scenarios_scenario_id_fk" FOREIGN KEY ("scenario_id") REFERENCES "public"."scenarios"("scenario_id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "audit_events_bench_index" ON "audit_events" USING btree ("bench_id","event_id");--> statement-breakpoint
CREATE INDEX "memberships_user_index" ON "memberships" USING btree ("user_id");--> statement-breakpoint
CREATE INDEX "runs_scenario_index" ON "runs" USING btree ("scenario_id","number");--> statement-breakpoint
CREATE INDEX "runs_audit_index" ON "runs" USING btree ("audit_state") WHERE "runs"."audit_state" = 'waiting';--> statement-breakpoint
CREATE INDEX "scenarios_updated_index" ON "scenarios" USING btree ("bench_id","updated_at","scenario_id");--> statement-breakpoint
CREATE INDEX "scenarios_created_index" ON "scenarios" USING btree ("bench_id","created_at","scenario_id");--> statement-breakpoint
CREATE INDEX "scenarios_title_index" ON "scenarios" USING btree ("bench_id",lower("title"),"scenario_id");--> statement-breakpoint
CREATE INDEX "sessions_user_index" ON "sessions" USING btree ("user_id","started_at");--> statement-breakpoint
CREATE INDEX "tags_tag_index" ON "tags" USING btree ("tag");--> statement-breakpoint
CREATE INDEX "throttles_window_index" ON "throttles" USING btree ("window_started_at");