CREATE TABLE "remembered_matches" (
	"campaign_id" integer NOT NULL,
	"facility" text NOT NULL,
	"columns" text NOT NULL,
	"choices" json NOT NULL,
	"remembered_at" timestamp(6) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "remembered_matches_pkey" PRIMARY KEY("campaign_id","facility","columns")
);
--> statement-breakpoint
ALTER TABLE "remembered_matches" ADD CONSTRAINT "remembered_matches_campaign_id_campaigns_id_fk" FOREIGN KEY ("campaign_id") REFERENCES "public"."campaigns"("id") ON DELETE no action ON UPDATE no action;