import * as z from "zod";
import { hex } from "@weighhouse/ledger/bytes";
import { leafHash } from "@weighhouse/ledger/entry";
import type { Entry } from "@weighhouse/ledger/entry";
import { nodeHasher } from "@weighhouse/ledger/node-hasher";
import {
  readEntry as readStored,
  readLatestHead,
  readSigningKeys,
} from "@weighhouse/store/read-ledger";
import type { StoredHead } from "@weighhouse/store/read-ledger";
import { enter } from "./access";
import type { Actor, Desk } from "./desk";
import { proveInclusion } from "./ledger-proofs";
import { parseInput } from "./parse-input";
import { authorName, memberNames } from "./read-entries";
import { onStore } from "./store-refusals";

export const readEntryInput = z.strictObject({ key: z.string(), seq: z.int().min(0) });

/** One entry with all that is needed to check it where it is read. */
export type ReadEntry = {
  entry: Entry;
  /** Who appended it, by name; null for the system and for a person who was forgotten. */
  name: string | null;
  /** The canonical text that `payloadSha256` is of. */
  payload: string;
  /** Hexadecimal. */
  leafHash: string;
  /** The newest signed head: its size, its root in base64, and the signed note. */
  head: StoredHead;
  /** Inclusion proof of this entry in the tree of that size, hexadecimal, from the leaf up. */
  proof: string[];
  /** Public keys that signed heads here, in the note format's text form. */
  keys: string[];
};

/** One entry, its payload's text and its inclusion proof under the newest signed head. */
export async function readEntry(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof readEntryInput>,
): Promise<ReadEntry> {
  const { key, seq } = parseInput(readEntryInput, input);
  await enter(desk, actor, key, "read-campaign");
  const { entry, payload } = await onStore(() => readStored(desk.store, { campaign: key, seq }));
  const [head, keys, names] = await Promise.all([
    readLatestHead(desk.store, key),
    readSigningKeys(desk.store),
    memberNames(desk, key),
  ]);
  return {
    entry,
    name: authorName(entry.by, names),
    payload,
    leafHash: hex(leafHash(nodeHasher, entry)),
    head,
    proof: await proveInclusion(desk, key, { index: seq, size: head.size }),
    keys,
  };
}
