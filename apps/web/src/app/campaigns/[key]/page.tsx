import type { Metadata } from "next";
import { CampaignFrame } from "@/campaign/campaign-frame";
import { readCampaign, sizeFrom } from "@/server/campaign";
import { StandingsView } from "@/standings/standings-view";

interface Props {
  params: Promise<{ key: string }>;
  searchParams: Promise<{ size?: string | string[] }>;
}

export async function generateMetadata(props: Props): Promise<Metadata> {
  const { key } = await props.params;
  const size = sizeFrom(await props.searchParams);
  return { title: (await readCampaign(key, size)).document.campaign.title };
}

export default async function StandingsPage(props: Props) {
  const { key } = await props.params;
  const size = sizeFrom(await props.searchParams);
  return (
    <CampaignFrame campaignKey={key} size={size}>
      <StandingsView campaignKey={key} size={size} />
    </CampaignFrame>
  );
}
