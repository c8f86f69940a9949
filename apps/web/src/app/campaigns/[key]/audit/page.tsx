import type { Metadata } from "next";
import { CampaignFrame } from "@/campaign/campaign-frame";
import { CitationRows } from "@/citation/citation-rows";
import { ArchiveSummary } from "@/forms/audit/archive-summary";
import { CiteForm } from "@/forms/records/cite-form";
import { CheckArchive } from "@/forms/audit/check-archive";
import { Section } from "@/look/section";
import { readCampaign } from "@/server/campaign";
import { readFor } from "@/server/reader";

export const metadata: Metadata = { title: "Audit trail" };

export default async function AuditPage(props: { params: Promise<{ key: string }> }) {
  const { key } = await props.params;
  const path = `/campaigns/${key}/audit`;
  const [view, summary, citations] = await Promise.all([
    readCampaign(key, null),
    readFor(path, (caller) => caller.audit.summary({ key })),
    readFor(path, (caller) => caller.standings.citations({ key })),
  ]);
  const member = view.role === "member" || view.role === "coordinator";
  return (
    <CampaignFrame campaignKey={key}>
      <Section title="Take the archive" gloss="the audit trail">
        <ArchiveSummary campaign={key} summary={summary} />
      </Section>
      {citations.length > 0 || member ? (
        <Section title="Cite the standings" gloss="frozen under a short code" id="cite">
          {citations.length > 0 ? <CitationRows citations={citations} /> : null}
          {member ? <CiteForm campaign={key} /> : null}
        </Section>
      ) : null}
      <Section title="Check an archive" gloss="here in the browser, nothing uploaded">
        <CheckArchive />
      </Section>
    </CampaignFrame>
  );
}
