import type { Measurement } from "@weighhouse/campaign/document";
import { canonicalJson } from "@weighhouse/ledger/canonical";

export type Difference = { field: string; there: unknown; posted: unknown };

/**
 * The first field in which a measurement that is posted differs from the one that is there under
 * its id; null where they say the same. When it was posted is no part of what it says, nor is that
 * it was set aside since.
 */
export function firstDifference(there: Measurement, posted: Measurement): Difference | null {
  for (const field of Object.keys(posted) as (keyof Measurement)[]) {
    if (field === "postedAt" || (field === "setAside" && posted.setAside === null)) continue;
    if (canonicalJson(there[field]) !== canonicalJson(posted[field])) {
      return { field, there: there[field], posted: posted[field] };
    }
  }
  return null;
}
