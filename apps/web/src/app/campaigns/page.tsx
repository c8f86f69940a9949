import type { Metadata } from "next";
import { CampaignRows } from "@/campaign/campaign-rows";
import { ButtonLink } from "@/look/button";
import { Empty } from "@/look/notice";
import { Section } from "@/look/section";
import { readActor, readFor } from "@/server/reader";

export const metadata: Metadata = { title: "Campaigns" };

export default async function CampaignsPage() {
  const [campaigns, actor] = await Promise.all([
    readFor("/campaigns", (caller) => caller.campaigns.list({})),
    readActor(),
  ]);
  return (
    <>
      <div className="mb-3 flex flex-wrap items-baseline justify-between gap-x-8 gap-y-2">
        <h1 className="mt-3">Campaigns</h1>
        <div className="no-print flex flex-wrap gap-2 text-[14px]">
          <ButtonLink href="/new-campaign">Open a campaign</ButtonLink>
          <ButtonLink href="/import-campaign">Import a document</ButtonLink>
        </div>
      </div>
      <Section title="Those you may see">
        {campaigns.length > 0 ? (
          <CampaignRows campaigns={campaigns} />
        ) : (
          <Empty title="No campaign yet.">
            <p>
              A campaign is one effort on one object or phenomenon: quantities to measure, teams
              with hypotheses, and measurements on one beam.{" "}
              {actor
                ? "Open one, or import a campaign document that you have."
                : "Sign in to open one, or to see those that are for members only."}
            </p>
          </Empty>
        )}
      </Section>
    </>
  );
}
