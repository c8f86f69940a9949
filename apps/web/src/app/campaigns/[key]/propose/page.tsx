import type { Metadata } from "next";
import { CampaignFrame } from "@/campaign/campaign-frame";
import { MembersOnly } from "@/forms/members-only";
import { ProposalForm } from "@/forms/records/proposal-form";
import { Empty } from "@/look/notice";
import { Section } from "@/look/section";
import { readCampaign } from "@/server/campaign";
import { readActor } from "@/server/reader";

export const metadata: Metadata = { title: "Propose a quantity" };

export default async function ProposePage(props: { params: Promise<{ key: string }> }) {
  const { key } = await props.params;
  const [view, actor] = await Promise.all([readCampaign(key, null), readActor()]);
  return (
    <CampaignFrame campaignKey={key}>
      {view.team !== null ? (
        <Section title="Propose a quantity" gloss="the coordinator declares it, or says why not">
          {view.document.observables.length === 0 ? (
            <Empty title="First an observable.">
              A quantity is an observable in a window; the coordinator declares observables.
            </Empty>
          ) : (
            <ProposalForm document={view.document} />
          )}
        </Section>
      ) : (
        <MembersOnly path={`/campaigns/${key}/propose`} signedIn={actor !== null}>
          Members of a team propose quantities.
        </MembersOnly>
      )}
    </CampaignFrame>
  );
}
