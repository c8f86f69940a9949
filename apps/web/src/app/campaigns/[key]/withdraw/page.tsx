import type { Metadata } from "next";
import { CampaignFrame } from "@/campaign/campaign-frame";
import { MembersOnly } from "@/forms/members-only";
import { WithdrawForm } from "@/forms/records/withdraw-form";
import { Empty } from "@/look/notice";
import { Section } from "@/look/section";
import { readCampaign } from "@/server/campaign";
import { readActor } from "@/server/reader";

export const metadata: Metadata = { title: "Withdraw measurements" };

export default async function WithdrawPage(props: { params: Promise<{ key: string }> }) {
  const { key } = await props.params;
  const [view, actor] = await Promise.all([readCampaign(key, null), readActor()]);
  const may = view.role === "coordinator" || view.role === "member";
  return (
    <CampaignFrame campaignKey={key}>
      {may ? (
        <Section
          title="Withdraw measurements"
          gloss="the standings are as if they had never been posted"
        >
          {view.document.measurements.length === 0 ? (
            <Empty title="There is nothing to withdraw.">No measurement is posted.</Empty>
          ) : (
            <WithdrawForm document={view.document} />
          )}
        </Section>
      ) : (
        <MembersOnly path={`/campaigns/${key}/withdraw`} signedIn={actor !== null}>
          Teams and observers withdraw what they posted, coordinators whatever was.
        </MembersOnly>
      )}
    </CampaignFrame>
  );
}
