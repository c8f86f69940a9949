CREATE TABLE "webhook_deliveries" (
	"campaign_id" integer NOT NULL,
	"webhook" text NOT NULL,
	"id" text NOT NULL,
	"what" text NOT NULL,
	"body" text NOT NULL,
	"queued_at" timestamp(6) with time zone DEFAULT clock_timestamp() NOT NULL,
	"tries" integer DEFAULT 0 NOT NULL,
	"last_try_at" timestamp(6) with time zone,
	"last_status" integer,
	"last_error" text,
	"delivered_at" timestamp(6) with time zone,
	"given_up_at" timestamp(6) with time zone,
	CONSTRAINT "webhook_deliveries_pkey" PRIMARY KEY("campaign_id","id"),
	CONSTRAINT "webhook_deliveries_what_check" CHECK ("webhook_deliveries"."what" in ('standings', 'test'))
);
--> statement-breakpoint
CREATE TABLE "webhooks" (
	"campaign_id" integer NOT NULL,
	"id" text NOT NULL,
	"url" text NOT NULL,
	"moved_by" double precision,
	"turned" boolean NOT NULL,
	"secret" "bytea" NOT NULL,
	"key_fingerprint" text NOT NULL,
	"made_by" text NOT NULL,
	"made_at" timestamp(6) with time zone DEFAULT clock_timestamp() NOT NULL,
	"told" json,
	"told_size" integer NOT NULL,
	"last_delivered_at" timestamp(6) with time zone,
	"switched_off_at" timestamp(6) with time zone,
	"switched_off_why" text,
	CONSTRAINT "webhooks_pkey" PRIMARY KEY("campaign_id","id"),
	CONSTRAINT "webhooks_tells_check" CHECK (coalesce("webhooks"."moved_by", 1) > 0 and ("webhooks"."moved_by" is not null or "webhooks"."turned")),
	CONSTRAINT "webhooks_off_check" CHECK (("webhooks"."switched_off_at" is null) = ("webhooks"."switched_off_why" is null))
);
--> statement-breakpoint
ALTER TABLE "webhook_deliveries" ADD CONSTRAINT "webhook_deliveries_webhook_fkey" FOREIGN KEY ("campaign_id","webhook") REFERENCES "public"."webhooks"("campaign_id","id") ON DELETE cascade ON UPDATE no action;--> statement-breakpoint
ALTER TABLE "webhooks" ADD CONSTRAINT "webhooks_campaign_id_campaigns_id_fk" FOREIGN KEY ("campaign_id") REFERENCES "public"."campaigns"("id") ON DELETE no action ON UPDATE no action;--> statement-breakpoint
CREATE INDEX "webhook_deliveries_queued_index" ON "webhook_deliveries" USING btree ("campaign_id","webhook","queued_at");