import type { Metadata } from "next";
import { CampaignFrame } from "@/campaign/campaign-frame";
import { OpenSealForm } from "@/forms/seals/open-seal-form";
import { ButtonLink } from "@/look/button";
import { Empty } from "@/look/notice";
import { Section } from "@/look/section";
import { SealCountRows } from "@/seals/seal-count-rows";
import { SealRows } from "@/seals/seal-rows";
import { readCampaign, sizeFrom } from "@/server/campaign";
import { readFor } from "@/server/reader";

export const metadata: Metadata = { title: "Seals" };

export default async function SealsPage(props: {
  params: Promise<{ key: string }>;
  searchParams: Promise<{ size?: string | string[] }>;
}) {
  const { key } = await props.params;
  const size = sizeFrom(await props.searchParams);
  const base = `/campaigns/${key}`;
  const { document, role } = await readCampaign(key, size);
  const { seals, counts } = await readFor(`${base}/seals`, (caller) =>
    caller.seals.list({ key, ...(size === null ? {} : { size }) }),
  );
  const member = (role === "member" || role === "coordinator") && size === null;
  return (
    <CampaignFrame campaignKey={key} size={size}>
      <Section
        title="Seals"
        gloss="filed, and not to be read yet"
        actions={
          member ? (
            <ButtonLink href={`${base}/seals/measurement`}>Seal a measurement</ButtonLink>
          ) : null
        }
      >
        {seals.length > 0 ? (
          <SealRows seals={seals} document={document} />
        ) : (
          <Empty title="Nothing is sealed.">
            <p>
              A team may seal a prediction, from its hypothesis’s page, and an observer a
              measurement: a digest is filed, and what it is of is shown at a time set beforehand. A
              revealed prediction counts from when it was sealed; one that is never opened counts as
              silence.
            </p>
          </Empty>
        )}
      </Section>
      {counts.length > 0 ? (
        <Section title="By hypothesis" gloss="how many sealed, how many opened" id="counts">
          <SealCountRows counts={counts} document={document} />
        </Section>
      ) : null}
      {member ? (
        <Section title="Open a seal" gloss="with the file that you kept" id="open">
          <OpenSealForm campaign={key} />
        </Section>
      ) : null}
    </CampaignFrame>
  );
}
