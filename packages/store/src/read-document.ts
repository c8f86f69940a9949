import type { CampaignDocument } from "@weighhouse/campaign/document";
import type { Store } from "./open-store";
import { StoreError } from "./store-error";

export type DocumentAsOf = {
  document: CampaignDocument;
  size: number;
  latestSize: number;
  /** Root of the tree of that size, base64. */
  treeHead: string;
  /** `at` of the last entry before that size. */
  at: string;
};

/** The campaign document as of a size (entries [0, size)); the latest unless given. */
export async function readDocument(
  _store: Store,
  _campaign: string,
  _size?: number,
): Promise<DocumentAsOf> {
  throw new StoreError("no-such-campaign", "");
}
