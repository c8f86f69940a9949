import type { Appended, Clock, NewEntry } from "./append";
import type { Store } from "./open-store";
import { StoreError } from "./store-error";

export type OpenCampaignInput = {
  /** User id of the campaign's first coordinator; null: opened by the system. */
  coordinator: string | null;
  /** Payload of `campaign.opened` without `ledger` and `clock`, which the store sets. */
  campaign: Record<string, unknown> & { key: string };
  /** Further entries of the same transaction (an import's declarations). */
  entries?: NewEntry[];
  clock?: Clock | undefined;
};

/** Makes a campaign with entry 0, its random ledger id, and its first coordinator. */
export async function openCampaign(
  _store: Store,
  _input: OpenCampaignInput,
): Promise<Appended & { campaignId: number; ledger: string; member: string | null }> {
  throw new StoreError("no-signer", "");
}
