import type { Metadata } from "next";
import { notFound } from "next/navigation";
import { CampaignFrame } from "@/campaign/campaign-frame";
import { DeclareView } from "@/forms/declare/declare-view";
import { partFrom } from "@/forms/declare/parts";
import { Notice } from "@/look/notice";
import { readCampaign } from "@/server/campaign";

export const metadata: Metadata = { title: "Declare" };

export default async function DeclarePartPage(props: {
  params: Promise<{ key: string; part: string }>;
}) {
  const { key, part: name } = await props.params;
  const part = partFrom(name);
  if (part === null) notFound();
  const view = await readCampaign(key, null);
  return (
    <CampaignFrame campaignKey={key}>
      {view.role === "coordinator" ? (
        <DeclareView view={view} part={part} />
      ) : (
        <Notice label="For coordinators.">
          Only a coordinator of this campaign declares its parts.
        </Notice>
      )}
    </CampaignFrame>
  );
}
