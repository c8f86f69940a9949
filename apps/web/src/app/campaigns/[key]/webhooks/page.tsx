import type { Metadata } from "next";
import { CampaignFrame } from "@/campaign/campaign-frame";
import { WebhookForm } from "@/forms/webhooks/webhook-form";
import { WebhookView } from "@/forms/webhooks/webhook-view";
import { Empty, Notice } from "@/look/notice";
import { Section } from "@/look/section";
import { readCampaign } from "@/server/campaign";
import { readFor } from "@/server/reader";

export const metadata: Metadata = { title: "Webhooks" };

export default async function WebhooksPage(props: { params: Promise<{ key: string }> }) {
  const { key } = await props.params;
  const path = `/campaigns/${key}/webhooks`;
  const view = await readCampaign(key, null);
  if (view.role !== "coordinator") {
    return (
      <CampaignFrame campaignKey={key}>
        <Notice label="For coordinators.">
          Only a coordinator of this campaign has addresses told of it. Everyone who may read it can
          follow{" "}
          <a className="link" href={`/api/v1/campaigns/${key}/feed.atom`}>
            its feed
          </a>
          .
        </Notice>
      </CampaignFrame>
    );
  }
  const webhooks = await readFor(path, (caller) => caller.webhooks.list({ key }));
  return (
    <CampaignFrame campaignKey={key}>
      <Section title="Webhooks" gloss="addresses that are told when the standings move">
        {webhooks.length === 0 ? (
          <Empty title="No address is told yet.">
            Name one below: your program hears of a verdict that turns, or of a hypothesis that
            moves, within seconds of the scoring.
          </Empty>
        ) : (
          <ul className="list-none">
            {webhooks.map((webhook) => (
              <WebhookView key={webhook.id} campaign={key} webhook={webhook} />
            ))}
          </ul>
        )}
      </Section>
      <Section title="Tell another address">
        <WebhookForm campaign={key} />
      </Section>
    </CampaignFrame>
  );
}
