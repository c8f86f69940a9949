import { completeDocument } from "@weighhouse/campaign/complete";
import { campaignDocumentSchema, type CampaignDocument } from "@weighhouse/campaign/document";

/** A document as read, from parts as they would stand in a file. */
export function documentFrom(parts: Record<string, unknown>): CampaignDocument {
  return completeDocument(
    campaignDocumentSchema.parse({
      format: "weighhouse-campaign/1",
      campaign: { key: "bench", title: "Bench" },
      ...parts,
    }),
  );
}
