import { createHash } from "node:crypto";
import { readCampaign } from "@weighhouse/campaign/read";
import { everyForm } from "@weighhouse/campaign/testing/every-form";
import { scoreCampaign } from "@weighhouse/engine/score";
import eclipse from "./campaigns/eclipse-1919.json";

/** Campaigns whose standings' bytes are watched: one for each form, and the 1919 eclipse. */
export const goldenCampaigns: Record<string, unknown> = { ...everyForm(), "eclipse-1919": eclipse };

/** SHA-256 of a campaign's standings as JSON, in hexadecimal. */
export function standingsDigest(form: unknown): string {
  const read = readCampaign(form);
  const scored = read.ok ? scoreCampaign(read.value) : read;
  if (!scored.ok) throw new Error(JSON.stringify(scored.problems));
  return createHash("sha256").update(JSON.stringify(scored.value)).digest("hex");
}

export interface GoldenDigests {
  /** The engine's version that they are of. */
  engine: string;
  digests: Record<string, string>;
}
