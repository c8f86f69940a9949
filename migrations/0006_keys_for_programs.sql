CREATE TABLE "api_keys" (
	"campaign_id" integer NOT NULL,
	"id" text NOT NULL,
	"member" text NOT NULL,
	"title" text NOT NULL,
	"scopes" text[] NOT NULL,
	"hash" "bytea" NOT NULL,
	"begins" text NOT NULL,
	"made_at" timestamp(6) with time zone DEFAULT clock_timestamp() NOT NULL,
	"expires_at" timestamp(6) with time zone,
	"last_used_at" timestamp(6) with time zone,
	"revoked_at" timestamp(6) with time zone,
	"revoked_by" text,
	CONSTRAINT "api_keys_pkey" PRIMARY KEY("campaign_id","id"),
	CONSTRAINT "api_keys_hash_check" CHECK (octet_length("api_keys"."hash") = 32),
	CONSTRAINT "api_keys_scopes_check" CHECK (cardinality("api_keys"."scopes") > 0),
	CONSTRAINT "api_keys_revoked_check" CHECK (("api_keys"."revoked_at" is null) = ("api_keys"."revoked_by" is null))
);
--> statement-breakpoint
CREATE TABLE "kept_answers" (
	"campaign_id" integer NOT NULL,
	"member" text NOT NULL,
	"key" text NOT NULL,
	"begun_at" timestamp(6) with time zone DEFAULT clock_timestamp() NOT NULL,
	"claim" text NOT NULL,
	"held_until" timestamp(6) with time zone NOT NULL,
	"digest" "bytea",
	"status" smallint,
	"headers" json,
	"body" "bytea",
	CONSTRAINT "kept_answers_pkey" PRIMARY KEY("campaign_id","member","key"),
	CONSTRAINT "kept_answers_answer_check" CHECK (num_nulls("kept_answers"."digest", "kept_answers"."status", "kept_answers"."headers", "kept_answers"."body") in (0, 4))
);
--> statement-breakpoint
CREATE TABLE "request_rates" (
	"subject" text PRIMARY KEY NOT NULL,
	"even_at" timestamp(6) with time zone NOT NULL
);
--> statement-breakpoint
ALTER TABLE "api_keys" ADD CONSTRAINT "api_keys_member_fkey" FOREIGN KEY ("campaign_id","member") REFERENCES "public"."memberships"("campaign_id","member") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "kept_answers" ADD CONSTRAINT "kept_answers_member_fkey" FOREIGN KEY ("campaign_id","member") REFERENCES "public"."memberships"("campaign_id","member") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
CREATE UNIQUE INDEX "api_keys_hash_unique" ON "api_keys" USING btree ("campaign_id","hash");--> statement-breakpoint
CREATE INDEX "kept_answers_begun_index" ON "kept_answers" USING btree ("campaign_id","begun_at");
--> statement-breakpoint
ALTER TABLE "request_rates" SET UNLOGGED;
