import type { CampaignDocument, Measurement } from "@weighhouse/campaign/document";
import { readDeclarations } from "@weighhouse/store/read-document";
import { readMeasurementPage } from "@weighhouse/store/read-measurement-page";
import { enter } from "./access";
import type { Actor, Desk } from "./desk";
import { DeskError } from "./desk-error";
import { onStore } from "./store-refusals";

export type MeasurementsPage = {
  /** As they were posted: what the document fills in from declarations is not filled in. */
  measurements: Measurement[];
  document: CampaignDocument;
  /** As of which size; the same for all pages that are asked for with it. */
  size: number;
  from: number;
  /** Whether there are others behind these. */
  more: boolean;
};

export const MEASUREMENTS_PER_PAGE = 1000;
export const MOST_PER_PAGE = 10_000;

/** The campaign's measurements by page, in the document's order, withdrawn ones left out. */
export async function readMeasurements(
  desk: Desk,
  actor: Actor,
  asked: { key: string; from?: number; limit?: number; size?: number },
): Promise<MeasurementsPage> {
  const { key, from = 0, limit = MEASUREMENTS_PER_PAGE } = asked;
  const { campaign } = await enter(desk, actor, key, "read-campaign");
  const size = asked.size ?? campaign.size;
  if (size > campaign.size) {
    throw new DeskError("not-found", `found the size ${size}; allowed are 1 to ${campaign.size}`);
  }
  const [{ document }, { contents, more }] = await Promise.all([
    onStore(() => readDeclarations(desk.store, key)),
    onStore(() => readMeasurementPage(desk.store, { campaign: key, size, from, limit })),
  ]);
  const measurements = contents.map((content) => {
    const { claimed: _, withdrawn: __, ...measurement } = content;
    return measurement as Measurement;
  });
  return { measurements, document, size, from, more };
}
