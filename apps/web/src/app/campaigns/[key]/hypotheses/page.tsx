import type { Metadata } from "next";
import { CampaignFrame } from "@/campaign/campaign-frame";
import { HypothesisRows } from "@/hypothesis/hypothesis-rows";
import { ButtonLink } from "@/look/button";
import { KeptLink } from "@/look/kept-link";
import { Empty } from "@/look/notice";
import { Section } from "@/look/section";
import { readCampaign, readStandings, sizeFrom } from "@/server/campaign";

export const metadata: Metadata = { title: "Hypotheses" };

export default async function HypothesesPage(props: {
  params: Promise<{ key: string }>;
  searchParams: Promise<{ size?: string | string[] }>;
}) {
  const { key } = await props.params;
  const size = sizeFrom(await props.searchParams);
  const scored = await readStandings(key, size);
  const { document, role } = await readCampaign(key, size);
  const member = role === "coordinator" || role === "member";
  return (
    <CampaignFrame campaignKey={key} size={size}>
      <Section
        title="Hypotheses"
        gloss="in order of registration"
        actions={
          <KeptLink className="link text-[14px]" href={`/campaigns/${key}/seals`}>
            Seals
          </KeptLink>
        }
      >
        {document.hypotheses.length > 0 ? (
          <HypothesisRows document={document} standings={scored.standings} />
        ) : (
          <Empty title="No hypothesis is registered yet.">
            <p>
              A hypothesis is a physical model that a team stands behind: a statement, and what it
              predicts of each quantity. What is filed before the data is weighed by them.
            </p>
            {member ? (
              <p className="mt-3">
                <ButtonLink href={`/campaigns/${key}/register`}>Register the first</ButtonLink>
              </p>
            ) : null}
          </Empty>
        )}
      </Section>
    </CampaignFrame>
  );
}
