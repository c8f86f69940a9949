CREATE TABLE "time_stamps" (
	"campaign_id" integer NOT NULL,
	"size" integer NOT NULL,
	"token" "bytea" NOT NULL,
	"at" timestamp(6) with time zone NOT NULL,
	"authority" text NOT NULL,
	"stored_at" timestamp(6) with time zone DEFAULT clock_timestamp() NOT NULL,
	CONSTRAINT "time_stamps_pkey" PRIMARY KEY("campaign_id","size")
);
--> statement-breakpoint
ALTER TABLE "time_stamps" ADD CONSTRAINT "time_stamps_head_fk" FOREIGN KEY ("campaign_id","size") REFERENCES "public"."heads"("campaign_id","size") ON DELETE no action ON UPDATE no action;