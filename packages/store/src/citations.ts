import { and, asc, eq, isNull } from "drizzle-orm";
import type { Store } from "./open-store";
import { campaigns, parts } from "./schema/tables";

/** The entry that cited standings under a code, in whichever campaign; the first, were there two. */
export async function findCitation(
  store: Store,
  code: string,
): Promise<{ campaign: string; seq: number } | null> {
  const [row] = await store.readDb
    .select({ campaign: campaigns.key, seq: parts.firstSeq })
    .from(parts)
    .innerJoin(campaigns, eq(campaigns.id, parts.campaignId))
    .where(and(eq(parts.part, "citation"), eq(parts.key, code), isNull(parts.toSize)))
    .orderBy(asc(campaigns.openedAt))
    .limit(1);
  return row ?? null;
}
