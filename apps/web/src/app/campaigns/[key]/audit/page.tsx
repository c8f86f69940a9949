import type { Metadata } from "next";
import { CampaignFrame } from "@/campaign/campaign-frame";
import { ArchiveSummary } from "@/forms/audit/archive-summary";
import { CheckArchive } from "@/forms/audit/check-archive";
import { Section } from "@/look/section";
import { readFor } from "@/server/reader";

export const metadata: Metadata = { title: "Audit trail" };

export default async function AuditPage(props: { params: Promise<{ key: string }> }) {
  const { key } = await props.params;
  const summary = await readFor(`/campaigns/${key}/audit`, (caller) =>
    caller.audit.summary({ key }),
  );
  return (
    <CampaignFrame campaignKey={key}>
      <Section title="Take the archive" gloss="the audit trail">
        <ArchiveSummary campaign={key} summary={summary} />
      </Section>
      <Section title="Check an archive" gloss="here in the browser, nothing uploaded">
        <CheckArchive />
      </Section>
    </CampaignFrame>
  );
}
