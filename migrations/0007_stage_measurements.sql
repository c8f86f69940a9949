CREATE UNLOGGED TABLE "staged_entries" (
	"campaign_id" integer NOT NULL,
	"upload" uuid NOT NULL,
	"part" integer NOT NULL,
	"entry" integer NOT NULL,
	"first_line" integer NOT NULL,
	"last_line" integer NOT NULL,
	"rows" integer NOT NULL,
	"payload" text NOT NULL,
	"sha256" text NOT NULL,
	"dated" json NOT NULL,
	CONSTRAINT "staged_entries_pkey" PRIMARY KEY("campaign_id","upload","part","entry")
);
--> statement-breakpoint
CREATE UNLOGGED TABLE "staged_fates" (
	"campaign_id" integer NOT NULL,
	"upload" uuid NOT NULL,
	"part" integer NOT NULL,
	"line" integer NOT NULL,
	"fate" text NOT NULL,
	"about" json,
	CONSTRAINT "staged_fates_pkey" PRIMARY KEY("campaign_id","upload","part","line")
);
--> statement-breakpoint
CREATE UNLOGGED TABLE "staged_measurements" (
	"campaign_id" integer NOT NULL,
	"upload" uuid NOT NULL,
	"part" integer NOT NULL,
	"line" integer NOT NULL,
	"entry" integer,
	"place" integer,
	"id" text,
	"measurand" text,
	"facility" text,
	"team" text,
	"batch" text,
	"observed_at" timestamp(6) with time zone,
	"value" double precision,
	"sd" double precision,
	"unit" text,
	"set_aside" boolean,
	"head" text,
	"tail" text,
	"problems" json,
	"notes" json,
	CONSTRAINT "staged_measurements_pkey" PRIMARY KEY("campaign_id","upload","part","line")
);
--> statement-breakpoint
CREATE UNLOGGED TABLE "staged_parts" (
	"campaign_id" integer NOT NULL,
	"upload" uuid NOT NULL,
	"part" integer NOT NULL,
	"sha256" text NOT NULL,
	"rows" integer NOT NULL,
	"bytes" bigint NOT NULL,
	CONSTRAINT "staged_parts_pkey" PRIMARY KEY("campaign_id","upload","part")
);
--> statement-breakpoint
CREATE TABLE "uploads" (
	"campaign_id" integer NOT NULL,
	"upload" uuid DEFAULT gen_random_uuid() NOT NULL,
	"member" text NOT NULL,
	"expires_at" timestamp(6) with time zone DEFAULT clock_timestamp() + interval '1 day' NOT NULL,
	CONSTRAINT "uploads_pkey" PRIMARY KEY("campaign_id","upload")
);
--> statement-breakpoint
ALTER TABLE "uploads" ADD CONSTRAINT "uploads_campaign_id_campaigns_id_fk" FOREIGN KEY ("campaign_id") REFERENCES "public"."campaigns"("id") ON DELETE no action ON UPDATE no action;