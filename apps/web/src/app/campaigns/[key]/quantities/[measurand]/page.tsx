import type { Metadata } from "next";
import { notFound } from "next/navigation";
import { CampaignFrame } from "@/campaign/campaign-frame";
import { hasPassed } from "@/forms/has-passed";
import { ObjectionForm } from "@/forms/records/objection-form";
import { Section } from "@/look/section";
import { MeasurandView } from "@/measurand/measurand-view";
import { Objections } from "@/measurand/objections";
import { readCampaign, readStandings, sizeFrom } from "@/server/campaign";
import { readFor } from "@/server/reader";

interface Props {
  params: Promise<{ key: string; measurand: string }>;
  searchParams: Promise<{ size?: string | string[] }>;
}

export async function generateMetadata(props: Props): Promise<Metadata> {
  const { key, measurand } = await props.params;
  const { document } = await readCampaign(key, sizeFrom(await props.searchParams));
  return { title: document.measurands.find((each) => each.key === measurand)?.title ?? measurand };
}

export default async function MeasurandPage(props: Props) {
  const { key, measurand: measurandKey } = await props.params;
  const size = sizeFrom(await props.searchParams);
  const scored = await readStandings(key, size);
  const { document, role, team } = await readCampaign(key, size);
  const said = await readFor(`/campaigns/${key}/quantities/${measurandKey}`, (caller) =>
    caller.ledger.remarks({ key, ...(size === null ? {} : { size }) }),
  );
  const objections = said.objections.filter((each) => each.measurand === measurandKey);
  const closes = document.campaign.registrationCloses;
  const objects = team !== null && size === null && !hasPassed(closes);
  const measurand = document.measurands.find((each) => each.key === measurandKey);
  const observable = document.observables.find((each) => each.key === measurand?.observable);
  if (!measurand || !observable) notFound();
  return (
    <CampaignFrame campaignKey={key} size={size}>
      <MeasurandView
        document={document}
        standings={scored.standings}
        measurand={measurand}
        observable={observable}
      />
      {objections.length > 0 || objects ? (
        <Section
          title="Objections to the no-model range"
          gloss="before registration closes"
          id="objections"
        >
          <Objections
            objections={objections}
            campaign={key}
            teams={new Map(document.teams.map((each) => [each.key, each.title]))}
            answers={role === "coordinator" && size === null}
          />
          {objects ? <ObjectionForm campaign={key} measurand={measurandKey} /> : null}
        </Section>
      ) : null}
    </CampaignFrame>
  );
}
