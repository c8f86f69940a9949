import type { Metadata } from "next";
import { CampaignFrame } from "@/campaign/campaign-frame";
import { MemberForm } from "@/forms/declare/member-form";
import { MemberTable } from "@/forms/declare/member-table";
import { MembersOnly } from "@/forms/members-only";
import { Section } from "@/look/section";
import { readCampaign } from "@/server/campaign";
import { readActor, readFor } from "@/server/reader";

export const metadata: Metadata = { title: "People" };

export default async function MembersPage(props: { params: Promise<{ key: string }> }) {
  const { key } = await props.params;
  const path = `/campaigns/${key}/members`;
  const [view, actor] = await Promise.all([readCampaign(key, null), readActor()]);
  if (view.role !== "member" && view.role !== "coordinator") {
    return (
      <CampaignFrame campaignKey={key}>
        <MembersOnly path={path} signedIn={actor !== null}>
          Who takes part is for members to see.
        </MembersOnly>
      </CampaignFrame>
    );
  }
  const members = await readFor(path, (caller) => caller.members.list({ key }));
  const { teams } = view.document;
  return (
    <CampaignFrame campaignKey={key}>
      <Section title="People" gloss={`${members.length} in this campaign`}>
        <MemberTable members={members} teams={teams} />
      </Section>
      {view.role === "coordinator" ? (
        <Section title="Add somebody">
          <MemberForm campaign={key} teams={teams} />
        </Section>
      ) : null}
    </CampaignFrame>
  );
}
