CREATE TABLE "api_token" (
	"id" text PRIMARY KEY NOT NULL,
	"user_id" text NOT NULL,
	"name" text NOT NULL,
	"prefix" text NOT NULL,
	"last_four" text NOT NULL,
	"hash" "bytea" NOT NULL,
	"scopes" text[] NOT NULL,
	"created_by" text NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	"expires_at" timestamp (3) with time zone,
	"last_used_at" timestamp (3) with time zone,
	"revoked_at" timestamp (3) with time zone,
	"revoked_by" text,
	CONSTRAINT "api_token_hash_unique" UNIQUE("hash")
);
--> statement-breakpoint
CREATE TABLE "app_user" (
	"id" text PRIMARY KEY NOT NULL,
	"email" text NOT NULL,
	"name" text NOT NULL,
	"role" text NOT NULL,
	"password_hash" text,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	"last_sign_in_at" timestamp (3) with time zone,
	"disabled_at" timestamp (3) with time zone,
	CONSTRAINT "app_user_email_unique" UNIQUE("email")
);
--> statement-breakpoint
CREATE TABLE "one_time_link" (
	"id" text PRIMARY KEY NOT NULL,
	"user_id" text NOT NULL,
	"purpose" text NOT NULL,
	"hash" "bytea" NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	"expires_at" timestamp (3) with time zone NOT NULL,
	"used_at" timestamp (3) with time zone,
	CONSTRAINT "one_time_link_hash_unique" UNIQUE("hash")
);
--> statement-breakpoint
CREATE TABLE "session" (
	"sid" text PRIMARY KEY NOT NULL,
	"user_id" text NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	"last_seen_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	"expires_at" timestamp (3) with time zone NOT NULL,
	"revoked_at" timestamp (3) with time zone,
	"user_agent" text
);
--> statement-breakpoint
CREATE TABLE "sample_chunk" (
	"set_id" text NOT NULL,
	"version" integer NOT NULL,
	"index" integer NOT NULL,
	"waters" jsonb NOT NULL,
	CONSTRAINT "sample_chunk_set_id_version_index_pk" PRIMARY KEY("set_id","version","index")
);
--> statement-breakpoint
CREATE TABLE "sample_set" (
	"id" text PRIMARY KEY NOT NULL,
	"owner_id" text NOT NULL,
	"name" text NOT NULL,
	"description" text DEFAULT '' NOT NULL,
	"visibility" text DEFAULT 'team' NOT NULL,
	"latest_version" integer NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	"deleted_at" timestamp (3) with time zone
);
--> statement-breakpoint
CREATE TABLE "sample_set_version" (
	"set_id" text NOT NULL,
	"version" integer NOT NULL,
	"created_by" text NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	"note" text DEFAULT '' NOT NULL,
	"water_count" integer NOT NULL,
	"units" jsonb NOT NULL,
	"columns" jsonb NOT NULL,
	"flags" jsonb NOT NULL,
	"raw_name" text,
	"raw_type" text,
	"raw" "bytea",
	CONSTRAINT "sample_set_version_set_id_version_pk" PRIMARY KEY("set_id","version")
);
--> statement-breakpoint
CREATE TABLE "chunk" (
	"job_id" text NOT NULL,
	"index" integer NOT NULL,
	"lane" text NOT NULL,
	"owner_id" text NOT NULL,
	"first_row" integer NOT NULL,
	"row_count" integer NOT NULL,
	"status" text DEFAULT 'waiting' NOT NULL,
	"attempt" integer DEFAULT 0 NOT NULL,
	"fence" bigint DEFAULT 0 NOT NULL,
	"lease_until" timestamp (3) with time zone,
	"leased_by" text,
	"error" text,
	CONSTRAINT "chunk_job_id_index_pk" PRIMARY KEY("job_id","index")
);
--> statement-breakpoint
CREATE TABLE "job" (
	"id" text PRIMARY KEY NOT NULL,
	"owner_id" text NOT NULL,
	"title" text NOT NULL,
	"spec" json NOT NULL,
	"spec_hash" text NOT NULL,
	"set_id" text,
	"set_version" integer,
	"visibility" text DEFAULT 'team' NOT NULL,
	"status" text NOT NULL,
	"lane" text NOT NULL,
	"row_count" integer NOT NULL,
	"chunk_count" integer DEFAULT 0 NOT NULL,
	"ok_count" integer DEFAULT 0 NOT NULL,
	"invalid_count" integer DEFAULT 0 NOT NULL,
	"not_converged_count" integer DEFAULT 0 NOT NULL,
	"done_count" integer DEFAULT 0 NOT NULL,
	"warning_count" integer DEFAULT 0 NOT NULL,
	"failed_count" integer DEFAULT 0 NOT NULL,
	"columns" jsonb,
	"case_names" jsonb,
	"axes" jsonb,
	"engine_version" text NOT NULL,
	"constants_version" text NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	"started_at" timestamp (3) with time zone,
	"finished_at" timestamp (3) with time zone,
	"cancel_requested_at" timestamp (3) with time zone,
	"error" text
);
--> statement-breakpoint
CREATE TABLE "job_event" (
	"id" bigserial PRIMARY KEY NOT NULL,
	"job_id" text NOT NULL,
	"at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	"type" text NOT NULL,
	"data" jsonb NOT NULL
);
--> statement-breakpoint
CREATE TABLE "job_water" (
	"job_id" text NOT NULL,
	"index" integer NOT NULL,
	"ids" jsonb NOT NULL,
	CONSTRAINT "job_water_job_id_index_pk" PRIMARY KEY("job_id","index")
);
--> statement-breakpoint
CREATE TABLE "result_block" (
	"job_id" text NOT NULL,
	"index" integer NOT NULL,
	"row_count" integer NOT NULL,
	"bytes" "bytea" NOT NULL,
	CONSTRAINT "result_block_job_id_index_pk" PRIMARY KEY("job_id","index")
);
--> statement-breakpoint
CREATE TABLE "result_order" (
	"id" text PRIMARY KEY NOT NULL,
	"job_id" text NOT NULL,
	"key" text NOT NULL,
	"row_count" integer NOT NULL,
	"rows" "bytea" NOT NULL,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	"last_used_at" timestamp (3) with time zone DEFAULT now() NOT NULL
);
--> statement-breakpoint
CREATE TABLE "audit_event" (
	"id" bigserial PRIMARY KEY NOT NULL,
	"at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	"actor_id" text,
	"via" text NOT NULL,
	"action" text NOT NULL,
	"target" text,
	"detail" jsonb NOT NULL,
	"request_id" text
);
--> statement-breakpoint
CREATE TABLE "idempotency_key" (
	"user_id" text NOT NULL,
	"key" text NOT NULL,
	"request_hash" text NOT NULL,
	"response_status" integer,
	"response_body" jsonb,
	"location" text,
	"created_at" timestamp (3) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "idempotency_key_user_id_key_pk" PRIMARY KEY("user_id","key")
);
--> statement-breakpoint
CREATE TABLE "rate_window" (
	"bucket" text NOT NULL,
	"window_start" timestamp (3) with time zone NOT NULL,
	"count" integer NOT NULL,
	CONSTRAINT "rate_window_bucket_window_start_pk" PRIMARY KEY("bucket","window_start")
);
--> statement-breakpoint
ALTER TABLE "api_token" ADD CONSTRAINT "api_token_user_id_app_user_id_fk" FOREIGN KEY ("user_id") REFERENCES "public"."app_user"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "one_time_link" ADD CONSTRAINT "one_time_link_user_id_app_user_id_fk" FOREIGN KEY ("user_id") REFERENCES "public"."app_user"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "session" ADD CONSTRAINT "session_user_id_app_user_id_fk" FOREIGN KEY ("user_id") REFERENCES "public"."app_user"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "sample_set" ADD CONSTRAINT "sample_set_owner_id_app_user_id_fk" FOREIGN KEY ("owner_id") REFERENCES "public"."app_user"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "sample_set_version" ADD CONSTRAINT "sample_set_version_set_id_sample_set_id_fk" FOREIGN KEY ("set_id") REFERENCES "public"."sample_set"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "chunk" ADD CONSTRAINT "chunk_job_id_job_id_fk" FOREIGN KEY ("job_id") REFERENCES "public"."job"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "job" ADD CONSTRAINT "job_owner_id_app_user_id_fk" FOREIGN KEY ("owner_id") REFERENCES "public"."app_user"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "job_event" ADD CONSTRAINT "job_event_job_id_job_id_fk" FOREIGN KEY ("job_id") REFERENCES "public"."job"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "job_water" ADD CONSTRAINT "job_water_job_id_job_id_fk" FOREIGN KEY ("job_id") REFERENCES "public"."job"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "result_block" ADD CONSTRAINT "result_block_job_id_job_id_fk" FOREIGN KEY ("job_id") REFERENCES "public"."job"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "result_order" ADD CONSTRAINT "result_order_job_id_job_id_fk" FOREIGN KEY ("job_id") REFERENCES "public"."job"("id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "api_token_user" ON "api_token" USING btree ("user_id");--> statement-breakpoint
CREATE INDEX "session_user" ON "session" USING btree ("user_id");--> statement-breakpoint
CREATE INDEX "chunk_open" ON "chunk" USING btree ("job_id","index") WHERE status in ('waiting', 'leased');--> statement-breakpoint
CREATE INDEX "chunk_leased" ON "chunk" USING btree ("lane","owner_id") WHERE status = 'leased';--> statement-breakpoint
CREATE INDEX "job_owner_created" ON "job" USING btree ("owner_id","created_at");--> statement-breakpoint
CREATE INDEX "job_status" ON "job" USING btree ("status");--> statement-breakpoint
CREATE INDEX "job_event_job" ON "job_event" USING btree ("job_id","id");--> statement-breakpoint
CREATE INDEX "result_order_job_key" ON "result_order" USING btree ("job_id","key");--> statement-breakpoint
CREATE INDEX "audit_at" ON "audit_event" USING btree ("at");