import type { Entry } from "@weighhouse/ledger/entry";
import type { Store } from "./open-store";
import { StoreError } from "./store-error";

export type StoredEntry = { entry: Entry; payload: string };
export type StoredHead = { size: number; root: string; note: string; at: string };

/** Entries [from, to), at most 1,000 at a time, with their payloads' canonical text. */
export async function readEntries(
  _store: Store,
  _input: { campaign: string; from: number; to: number },
): Promise<StoredEntry[]> {
  throw new StoreError("no-such-campaign", "");
}

export async function readEntry(
  _store: Store,
  _input: { campaign: string; seq: number },
): Promise<StoredEntry> {
  throw new StoreError("no-such-entry", "");
}

/** All entries [0, size) in order, without holding them all. */
export async function* streamEntries(
  _store: Store,
  _input: { campaign: string; size?: number },
): AsyncGenerator<StoredEntry> {
  throw new StoreError("no-such-campaign", "");
}

/** The reader of stored nodes that `inclusionProof` and `consistencyProof` take. */
export async function nodeReader(
  _store: Store,
  _campaign: string,
): Promise<(level: number, index: number) => Promise<Uint8Array>> {
  throw new StoreError("no-such-campaign", "");
}

/** The signed heads up to a size, in order. */
export async function readHeads(
  _store: Store,
  _input: { campaign: string; size?: number },
): Promise<StoredHead[]> {
  throw new StoreError("no-such-campaign", "");
}

/** The latest signed head. */
export async function readLatestHead(_store: Store, _campaign: string): Promise<StoredHead> {
  throw new StoreError("no-such-campaign", "");
}

/** vkeys of every key that has signed heads here. */
export async function readSigningKeys(_store: Store): Promise<string[]> {
  throw new StoreError("no-such-campaign", "");
}
