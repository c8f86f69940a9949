import { amendCampaign, amendCampaignInput } from "@weighhouse/desk/amend-campaign";
import { closeRegistration, closeRegistrationInput } from "@weighhouse/desk/close-registration";
import { importCampaign, importCampaignInput } from "@weighhouse/desk/import-campaign";
import { listCampaigns, listCampaignsInput } from "@weighhouse/desk/list-campaigns";
import { openCampaign, openCampaignInput } from "@weighhouse/desk/open-campaign";
import { previewImport, previewImportInput } from "@weighhouse/desk/preview-import";
import { readCampaign, readCampaignInput } from "@weighhouse/desk/read-campaign";
import { procedure, router, takes } from "../trpc";

export const campaignsRouter = router({
  list: procedure
    .input(takes(listCampaignsInput))
    .query(({ ctx, input }) => listCampaigns(ctx.desk, ctx.actor, input)),
  get: procedure
    .input(takes(readCampaignInput))
    .query(({ ctx, input }) => readCampaign(ctx.desk, ctx.actor, input)),
  open: procedure
    .input(takes(openCampaignInput))
    .mutation(({ ctx, input }) => openCampaign(ctx.desk, ctx.actor, input)),
  amend: procedure
    .input(takes(amendCampaignInput))
    .mutation(({ ctx, input }) => amendCampaign(ctx.desk, ctx.actor, input)),
  // A mutation for its size alone: a document doesn't fit into an address. It changes nothing.
  previewImport: procedure
    .input(takes(previewImportInput))
    .mutation(({ ctx, input }) => previewImport(ctx.desk, ctx.actor, input)),
  import: procedure
    .input(takes(importCampaignInput))
    .mutation(({ ctx, input }) => importCampaign(ctx.desk, ctx.actor, input)),
  closeRegistration: procedure
    .input(takes(closeRegistrationInput))
    .mutation(({ ctx, input }) => closeRegistration(ctx.desk, ctx.actor, input)),
});
