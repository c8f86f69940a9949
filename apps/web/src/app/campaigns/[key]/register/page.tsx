import type { Metadata } from "next";
import { CampaignFrame } from "@/campaign/campaign-frame";
import { RegisterForm } from "@/forms/register/register-form";
import { registrantOf } from "@/forms/register/registrant";
import { MembersOnly } from "@/forms/members-only";
import { readCampaign } from "@/server/campaign";
import { readActor } from "@/server/reader";

export const metadata: Metadata = { title: "Register a hypothesis" };

export default async function RegisterPage(props: { params: Promise<{ key: string }> }) {
  const { key } = await props.params;
  const [view, actor] = await Promise.all([readCampaign(key, null), readActor()]);
  const registrant = registrantOf(view, actor);
  return (
    <CampaignFrame campaignKey={key}>
      <h2 className="mb-3">Register a hypothesis</h2>
      {registrant === null ? (
        <MembersOnly path={`/campaigns/${key}/register`} signedIn={actor !== null}>
          Teams’ members register hypotheses.
        </MembersOnly>
      ) : (
        <RegisterForm document={view.document} registrant={registrant} amending={null} />
      )}
    </CampaignFrame>
  );
}
