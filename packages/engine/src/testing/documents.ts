import type { CampaignDocument } from "@weighhouse/campaign/document";
import { readCampaign } from "@weighhouse/campaign/read";
import { standingsSchema } from "@weighhouse/campaign/standings";
import type { Standings } from "@weighhouse/campaign/standings";
import { scoreCampaign, type ScoreOptions } from "../score";

/** A document as read, from parts as they would stand in a file. */
export function documentFrom(parts: Record<string, unknown>): CampaignDocument {
  const read = readCampaign({
    format: "weighhouse-campaign/1",
    campaign: { key: "bench", title: "Bench" },
    ...parts,
  });
  if (!read.ok) throw new Error(JSON.stringify(read.problems));
  return read.value;
}

/** Standings that the schema finds right. */
export function standingsFrom(document: CampaignDocument, options?: ScoreOptions): Standings {
  const scored = scoreCampaign(document, options);
  if (!scored.ok) throw new Error(JSON.stringify(scored.problems));
  return standingsSchema.parse(scored.value);
}
