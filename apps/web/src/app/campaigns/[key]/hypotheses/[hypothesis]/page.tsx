import type { Metadata } from "next";
import { notFound } from "next/navigation";
import type { SealCounts } from "@weighhouse/desk/read-seals";
import { CampaignFrame } from "@/campaign/campaign-frame";
import { RetireForm } from "@/forms/records/retire-form";
import { HypothesisView } from "@/hypothesis/hypothesis-view";
import { ButtonLink } from "@/look/button";
import { Notice } from "@/look/notice";
import { Section } from "@/look/section";
import { Time } from "@/look/time";
import { SealRows } from "@/seals/seal-rows";
import { readCampaign, readStandings, sizeFrom } from "@/server/campaign";
import { readFor } from "@/server/reader";

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
  const path = `/campaigns/${key}/hypotheses/${hypothesisKey}`;
  const asOf = { key, ...(size === null ? {} : { size }) };
  const [allRetired, allSeals] = await Promise.all([
    readFor(path, (caller) => caller.hypotheses.retired(asOf)),
    readFor(path, (caller) => caller.seals.list(asOf)),
  ]);
  const retired = allRetired.find((each) => each.hypothesis === hypothesisKey);
  const seals = allSeals.seals.filter((each) => each.hypothesis === hypothesisKey);
  const member = role === "member" || role === "coordinator";
  const own = member && team === hypothesis.team && size === null && retired === undefined;
  return (
    <CampaignFrame campaignKey={key} size={size}>
      {retired === undefined ? null : (
        <div className="mb-4">
          <Notice label="Retired.">
            Its team stands behind it no more since <Time at={retired.at} />: {retired.reason}. What
            it predicted goes on being judged.
          </Notice>
        </div>
      )}
      {own ? (
        <p className="no-print mb-3 flex flex-wrap gap-2">
          <ButtonLink href={`${path}/amend`}>Amend this hypothesis</ButtonLink>
          <ButtonLink href={`${path}/seal`}>Seal a prediction</ButtonLink>
        </p>
      ) : null}
      <HypothesisView
        document={document}
        standings={scored.standings}
        hypothesis={hypothesis}
        index={index}
      />
      {seals.length > 0 ? (
        <Section title="Seals" gloss={sealWords(allSeals.counts, hypothesisKey)} id="seals">
          <SealRows seals={seals} document={document} />
        </Section>
      ) : null}
      {own ? (
        <Section title="Retire it" gloss="it stays, with its standing" id="retire">
          <RetireForm campaign={key} hypothesis={hypothesisKey} />
        </Section>
      ) : null}
    </CampaignFrame>
  );
}

function sealWords(counts: readonly SealCounts[], hypothesis: string): string {
  const found = counts.find((each) => each.hypothesis === hypothesis);
  const { sealed = 0, revealed = 0, never = 0 } = found ?? {};
  return `${sealed} sealed, ${revealed} opened, ${never} never opened`;
}
