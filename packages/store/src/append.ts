import type { EntryKind } from "@weighhouse/campaign/entries";
import type { Entry } from "@weighhouse/ledger/entry";
import type { Store } from "./open-store";
import { StoreError } from "./store-error";

/** Returns an instant, `2031-03-01T00:00:00.000000Z`. Only tests and the demo pass one. */
export type Clock = () => string;

export type NewEntry = { kind: EntryKind; payload: unknown };

export type Appended = {
  /** The entries are [from, to). */
  from: number;
  to: number;
  /** `at` of each entry, in order. */
  at: string[];
  /** Root of the tree of size `to`, base64, as in the third line of the signed head. */
  treeHead: string;
};

export type AppendInput = {
  campaign: string;
  by: Entry["by"];
  entries: NewEntry[];
  clock?: Clock | undefined;
  /** The size that the caller's decision was made on; if the ledger has grown since: `moved-on`. */
  expectedSize?: number | undefined;
};

/** Appends entries to a campaign's ledger in one transaction. */
export async function appendEntries(_store: Store, _input: AppendInput): Promise<Appended> {
  throw new StoreError("no-signer", "");
}
