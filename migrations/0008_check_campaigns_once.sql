ALTER TABLE "measurements" DROP CONSTRAINT "measurements_campaign_id_campaigns_id_fk";
