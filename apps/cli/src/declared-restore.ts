import { base64 } from "@weighhouse/ledger/bytes";
import { ask, campaignAddress } from "./server";
import type { WatchedHead } from "./watched-heads";

/** An entry in which a ledger says that its database was put back to a backup. */
export type DeclaredRestore = { seq: number; after: number; reason: string };

type Line = { entry: { seq: number; kind: string }; payload: string };

/**
 * The entry by which a ledger says that a head which was signed before was lost with a restored
 * database; null where it says nothing of the kind.
 *
 * @param from size of a head that still holds
 */
export async function declaredRestore(
  campaign: string,
  lost: WatchedHead,
  { from, to }: { from: number; to: number },
): Promise<DeclaredRestore | null> {
  let next = from;
  while (next < to) {
    const address = campaignAddress(campaign, `ledger/entries?from=${next}&to=${to}`);
    const body = await ask(address, { accept: "application/x-ndjson" });
    const text = new TextDecoder().decode(body).trimEnd();
    const lines = text === "" ? [] : text.split("\n").map((line) => JSON.parse(line) as Line);
    const found = lines.find((line) => isOf(line, lost));
    if (found !== undefined) {
      const { after, reason } = JSON.parse(found.payload) as Omit<DeclaredRestore, "seq">;
      return { seq: found.entry.seq, after, reason };
    }
    const last = lines.at(-1);
    if (last === undefined) return null;
    next = last.entry.seq + 1;
  }
  return null;
}

/** It names the very head, or a later one of the same lost entries. */
function isOf({ entry, payload }: Line, { head }: WatchedHead): boolean {
  if (entry.kind !== "ledger.restored") return false;
  const said = JSON.parse(payload) as { before: number; root: string; after: number };
  if (said.before === head.size) return said.root === base64(head.root);
  return said.after < head.size && head.size < said.before;
}
