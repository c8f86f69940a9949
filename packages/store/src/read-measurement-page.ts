import type { PartContent } from "@weighhouse/campaign/parts";
import { and, asc, eq, gt, isNull, lte, or } from "drizzle-orm";
import { findCampaign } from "./campaigns";
import type { Store } from "./open-store";
import { measurements } from "./schema/tables";

/** Measurements of a document as of a size, in its order: those at [from, from + limit). */
export async function readMeasurementPage(
  store: Store,
  asked: { campaign: string; size: number; from: number; limit: number },
): Promise<{ contents: PartContent[]; more: boolean }> {
  const { campaign, size, from, limit } = asked;
  const { id } = await findCampaign(store, campaign);
  const rows = await store.readDb
    .select({ content: measurements.content })
    .from(measurements)
    .where(
      and(
        eq(measurements.campaignId, id),
        eq(measurements.withdrawn, false),
        lte(measurements.fromSize, size),
        or(isNull(measurements.toSize), gt(measurements.toSize, size)),
      ),
    )
    .orderBy(asc(measurements.firstSeq), asc(measurements.firstPlace))
    .offset(from)
    .limit(limit + 1);
  const contents = rows.map(({ content }) => JSON.parse(content) as PartContent);
  return { contents: contents.slice(0, limit), more: contents.length > limit };
}
