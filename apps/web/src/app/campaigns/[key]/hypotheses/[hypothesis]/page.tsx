import type { Metadata } from "next";
import { notFound } from "next/navigation";
import { CampaignFrame } from "@/campaign/campaign-frame";
import { HypothesisView } from "@/hypothesis/hypothesis-view";
import { ButtonLink } from "@/look/button";
import { readCampaign, readStandings, sizeFrom } from "@/server/campaign";

interface Props {
  params: Promise<{ key: string; hypothesis: string }>;
  searchParams: Promise<{ size?: string | string[] }>;
}

export async function generateMetadata(props: Props): Promise<Metadata> {
  const { key, hypothesis } = await props.params;
  const { document } = await readCampaign(key, sizeFrom(await props.searchParams));
  return {
    title: document.hypotheses.find((each) => each.key === hypothesis)?.title ?? hypothesis,
  };
}

export default async function HypothesisPage(props: Props) {
  const { key, hypothesis: hypothesisKey } = await props.params;
  const size = sizeFrom(await props.searchParams);
  const scored = await readStandings(key, size);
  const { document, role, team } = await readCampaign(key, size);
  const index = document.hypotheses.findIndex((each) => each.key === hypothesisKey);
  const hypothesis = document.hypotheses[index];
  if (!hypothesis) notFound();
  const member = role === "member" || role === "coordinator";
  return (
    <CampaignFrame campaignKey={key} size={size}>
      {member && team === hypothesis.team && size === null ? (
        <p className="no-print mb-3">
          <ButtonLink href={`/campaigns/${key}/hypotheses/${hypothesisKey}/amend`}>
            Amend this hypothesis
          </ButtonLink>
        </p>
      ) : null}
      <HypothesisView
        document={document}
        standings={scored.standings}
        hypothesis={hypothesis}
        index={index}
      />
    </CampaignFrame>
  );
}
