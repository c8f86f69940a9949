"use client";

import type { Campaign } from "@weighhouse/campaign/document";
import { payloadSchemas, type Payload } from "@weighhouse/campaign/entries";
import { useMemo } from "react";
import { useTRPCClient } from "@/trpc/client";
import { formSchema } from "../form-schema";
import { CampaignFields } from "./campaign-fields";
import { campaignContent, draftOfCampaign, emptyCampaign, type CampaignDraft } from "./part-drafts";
import { PartForm } from "./part-form";

type Fields = Payload<"campaign.amended">;

// A campaign's fields and who may see it: the same whether it is opened or changed.
const schema = formSchema<CampaignDraft, Fields>({
  schema: payloadSchemas["campaign.amended"],
  content: campaignContent,
});

/** Opens a campaign with a ledger of its own; whoever does becomes its coordinator. */
export function NewCampaignForm() {
  const client = useTRPCClient();
  return (
    <PartForm
      name="campaign"
      label="Declare a campaign"
      button="Declare campaign"
      defaults={emptyCampaign}
      schema={schema}
      under={/^\/campaign(?=\/|$)/}
      send={({ visibility, ...campaign }) => client.campaigns.open.mutate({ campaign, visibility })}
      done={({ title }) => `“${title}” is declared.`}
      leaveTo={({ key }) => `/campaigns/${key}/declare`}
    >
      <CampaignFields opened={false} />
    </PartForm>
  );
}

export function AmendCampaignForm(props: {
  campaign: Campaign;
  visibility: CampaignDraft["visibility"];
}) {
  const { campaign, visibility } = props;
  const client = useTRPCClient();
  const defaults = useMemo(() => draftOfCampaign(campaign, visibility), [campaign, visibility]);
  return (
    <PartForm
      name={`amend-campaign:${campaign.key}`}
      label="Title, rule and dates"
      button="Save changes"
      afterSending="keep"
      defaults={defaults}
      schema={schema}
      under={/^\/campaign(?=\/|$)/}
      send={(fields) => client.campaigns.amend.mutate({ key: campaign.key, campaign: fields })}
      done={() => "Changed; the ledger holds what it was before."}
    >
      <CampaignFields opened />
    </PartForm>
  );
}
