import type { Metadata } from "next";
import { notFound } from "next/navigation";
import { CampaignFrame } from "@/campaign/campaign-frame";
import { MembersOnly } from "@/forms/members-only";
import { notOnForm } from "@/forms/register/hypothesis-json";
import { RegisterForm } from "@/forms/register/register-form";
import { registrantOf } from "@/forms/register/registrant";
import { Notice } from "@/look/notice";
import { readCampaign } from "@/server/campaign";
import { readActor } from "@/server/reader";

export const metadata: Metadata = { title: "Amend a hypothesis" };

export default async function AmendPage(props: {
  params: Promise<{ key: string; hypothesis: string }>;
}) {
  const { key, hypothesis } = await props.params;
  const [view, actor] = await Promise.all([readCampaign(key, null), readActor()]);
  const amending = view.document.hypotheses.find((each) => each.key === hypothesis);
  if (amending === undefined) notFound();
  const registrant = registrantOf(view, actor);
  // What is sealed stays withheld by the ledger itself, whatever a new version says.
  const missing = notOnForm({ ...amending, withheld: [] }, view.document);
  return (
    <CampaignFrame campaignKey={key}>
      <h2 className="mb-3">Amend “{amending.title}”</h2>
      {registrant === null || registrant.team !== amending.team ? (
        <MembersOnly
          path={`/campaigns/${key}/hypotheses/${hypothesis}/amend`}
          signedIn={actor !== null}
        >
          A hypothesis is amended by its own team.
        </MembersOnly>
      ) : missing.length > 0 ? (
        <Notice label="Not on this form.">
          It holds what this form can’t show, and nothing of it shall be lost:
          <ul className="list-disc pl-5">
            {missing.map((line) => (
              <li key={line}>{line}</li>
            ))}
          </ul>
        </Notice>
      ) : (
        <RegisterForm document={view.document} registrant={registrant} amending={amending} />
      )}
    </CampaignFrame>
  );
}
