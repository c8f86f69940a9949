import type { Metadata } from "next";
import { notFound } from "next/navigation";
import { CampaignFrame } from "@/campaign/campaign-frame";
import { MeasurandView } from "@/measurand/measurand-view";
import { readCampaign, readStandings, sizeFrom } from "@/server/campaign";

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
  const { document } = await readCampaign(key, size);
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
    </CampaignFrame>
  );
}
