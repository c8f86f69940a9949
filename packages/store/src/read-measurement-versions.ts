import type { PartContent } from "@weighhouse/campaign/parts";
import { and, asc, eq, lte } from "drizzle-orm";
import { findCampaign } from "./campaigns";
import type { Store } from "./open-store";
import { measurements } from "./schema/tables";

/** What each entry up to a size made of one measurement, oldest first. */
export async function readMeasurementVersions(
  store: Store,
  { campaign, id, size }: { campaign: string; id: string; size: number },
): Promise<{ seq: number; content: PartContent }[]> {
  const found = await findCampaign(store, campaign);
  const rows = await store.readDb
    .select({ fromSize: measurements.fromSize, content: measurements.content })
    .from(measurements)
    .where(
      and(
        eq(measurements.campaignId, found.id),
        eq(measurements.id, id),
        lte(measurements.fromSize, size),
      ),
    )
    .orderBy(asc(measurements.fromSize));
  // A version shows from the size after its entry.
  return rows.map(({ fromSize, content }) => ({
    seq: fromSize - 1,
    content: JSON.parse(content) as PartContent,
  }));
}
