CREATE TABLE "held_seals" (
	"campaign_id" integer NOT NULL,
	"digest" text NOT NULL,
	"encrypted" "bytea" NOT NULL,
	"key_fingerprint" text NOT NULL,
	"held_at" timestamp(6) with time zone DEFAULT now() NOT NULL,
	CONSTRAINT "held_seals_pkey" PRIMARY KEY("campaign_id","digest")
);
--> statement-breakpoint
ALTER TABLE "measurements" ADD COLUMN "withdrawn" boolean DEFAULT false NOT NULL;--> statement-breakpoint
ALTER TABLE "held_seals" ADD CONSTRAINT "held_seals_campaign_id_campaigns_id_fk" FOREIGN KEY ("campaign_id") REFERENCES "public"."campaigns"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "parts_citation_index" ON "parts" USING btree ("key") WHERE "parts"."part" = 'citation';