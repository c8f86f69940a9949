import type { Metadata } from "next";
import { notFound } from "next/navigation";
import { CampaignFrame } from "@/campaign/campaign-frame";
import { MembersOnly } from "@/forms/members-only";
import { registrantOf } from "@/forms/register/registrant";
import { SealPredictionForm } from "@/forms/seals/seal-prediction-form";
import { Section } from "@/look/section";
import { readCampaign } from "@/server/campaign";
import { readActor } from "@/server/reader";

export const metadata: Metadata = { title: "Seal a prediction" };

export default async function SealPage(props: {
  params: Promise<{ key: string; hypothesis: string }>;
}) {
  const { key, hypothesis: hypothesisKey } = await props.params;
  const [view, actor] = await Promise.all([readCampaign(key, null), readActor()]);
  const hypothesis = view.document.hypotheses.find((each) => each.key === hypothesisKey);
  if (hypothesis === undefined) notFound();
  const registrant = registrantOf(view, actor);
  return (
    <CampaignFrame campaignKey={key}>
      {registrant === null || registrant.team !== hypothesis.team ? (
        <MembersOnly
          path={`/campaigns/${key}/hypotheses/${hypothesisKey}/seal`}
          signedIn={actor !== null}
        >
          A prediction is sealed by its hypothesis’s own team.
        </MembersOnly>
      ) : (
        <Section title={`Seal a prediction of “${hypothesis.title}”`} id="seal">
          <p className="mb-3 max-w-[90ch] text-quiet">
            That you predict the quantity is public from now on. What you predict is shown once the
            seal is open, and counts from now.
          </p>
          <SealPredictionForm
            document={view.document}
            ledger={view.ledger}
            hypothesis={hypothesis}
          />
        </Section>
      )}
    </CampaignFrame>
  );
}
