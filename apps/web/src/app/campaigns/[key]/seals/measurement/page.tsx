import type { Metadata } from "next";
import { CampaignFrame } from "@/campaign/campaign-frame";
import { MembersOnly } from "@/forms/members-only";
import { SealMeasurementForm } from "@/forms/seals/seal-measurement-form";
import { Section } from "@/look/section";
import { readCampaign } from "@/server/campaign";
import { readActor } from "@/server/reader";

export const metadata: Metadata = { title: "Seal a measurement" };

export default async function SealMeasurementPage(props: { params: Promise<{ key: string }> }) {
  const { key } = await props.params;
  const [view, actor] = await Promise.all([readCampaign(key, null), readActor()]);
  const member = view.role === "member" || view.role === "coordinator";
  return (
    <CampaignFrame campaignKey={key}>
      {member ? (
        <Section title="Seal a measurement" gloss="its quantity is public, its value is not">
          <p className="mb-3 max-w-[90ch] text-quiet">
            Until it is open, your team files no prediction of that quantity: you know what nobody
            else does.
          </p>
          <SealMeasurementForm document={view.document} ledger={view.ledger} team={view.team} />
        </Section>
      ) : (
        <MembersOnly path={`/campaigns/${key}/seals/measurement`} signedIn={actor !== null}>
          Members and coordinators seal measurements.
        </MembersOnly>
      )}
    </CampaignFrame>
  );
}
