import type { Metadata } from "next";
import { CampaignFrame } from "@/campaign/campaign-frame";
import { ButtonLink } from "@/look/button";
import { Empty } from "@/look/notice";
import { Section } from "@/look/section";
import { Proposals } from "@/measurand/proposals";
import { QuantityRows } from "@/measurand/quantity-rows";
import { readCampaign, readStandings, sizeFrom } from "@/server/campaign";
import { readFor } from "@/server/reader";

export const metadata: Metadata = { title: "Quantities" };

export default async function QuantitiesPage(props: {
  params: Promise<{ key: string }>;
  searchParams: Promise<{ size?: string | string[] }>;
}) {
  const { key } = await props.params;
  const size = sizeFrom(await props.searchParams);
  const scored = await readStandings(key, size);
  const { document, role, team } = await readCampaign(key, size);
  const { proposals } = await readFor(`/campaigns/${key}/quantities`, (caller) =>
    caller.ledger.remarks({ key, ...(size === null ? {} : { size }) }),
  );
  const proposes = team !== null && size === null;
  return (
    <CampaignFrame campaignKey={key} size={size}>
      <Section
        title="Quantities"
        gloss="measurands, in window order"
        actions={
          proposes ? (
            <ButtonLink href={`/campaigns/${key}/propose`}>Propose a quantity</ButtonLink>
          ) : null
        }
      >
        {document.measurands.length > 0 ? (
          <QuantityRows document={document} standings={scored.standings} campaignKey={key} />
        ) : (
          <Empty title="No quantity is declared yet.">
            <p>
              A quantity (measurand) is one thing under stated conditions that is predicted and
              measured: what kind, in which window, and what one would expect of it knowing none of
              the hypotheses.
            </p>
            {role === "coordinator" ? (
              <p className="mt-3">
                <ButtonLink href={`/campaigns/${key}/declare`}>Declare the first</ButtonLink>
              </p>
            ) : null}
          </Empty>
        )}
      </Section>
      {proposals.length > 0 ? (
        <Section title="Proposed" gloss="by teams, for the coordinator to declare" id="proposed">
          <Proposals
            proposals={proposals}
            campaign={key}
            teams={new Map(document.teams.map((each) => [each.key, each.title]))}
            answers={role === "coordinator" && size === null}
          />
        </Section>
      ) : null}
    </CampaignFrame>
  );
}
