import { hex } from "@weighhouse/ledger/bytes";
import { nodeHasher } from "@weighhouse/ledger/node-hasher";
import { verifyConsistency } from "@weighhouse/ledger/proof";
import { ask, campaignAddress } from "./server";
import type { WatchedHead } from "./watched-heads";
import { Refusal } from "./refusal";

/** Whether the ledger of a new head begins with that of an old one; else why not. */
export async function compareHeads(
  campaign: string,
  old: WatchedHead,
  now: WatchedHead,
): Promise<string | null> {
  const [from, to] = [old.head.size, now.head.size];
  if (old.head.origin !== now.head.origin) {
    return `it is the ledger ${now.head.origin}, where ${old.head.origin} was watched`;
  }
  if (from > to) return `it has ${to} entries, where ${from} were signed before`;
  const proof = from === to ? [] : await askProof(campaign, { from, to });
  const { root: oldRoot } = old.head;
  const { root: newRoot } = now.head;
  const outcome = verifyConsistency(nodeHasher, { from, to, oldRoot, newRoot, proof });
  if (outcome.ok) return null;
  const roots = `root ${hex(oldRoot).slice(0, 16)}… before`;
  return `its first ${from} entries are not those that were signed before (${roots}; ${outcome.reason})`;
}

async function askProof(
  campaign: string,
  { from, to }: { from: number; to: number },
): Promise<Uint8Array[]> {
  const address = campaignAddress(campaign, `ledger/consistency?from=${from}&to=${to}`);
  const body = await ask(address, { accept: "application/json" });
  try {
    const { proof } = JSON.parse(new TextDecoder().decode(body)) as { proof: unknown };
    return (proof as unknown[]).map((step) => {
      if (typeof step !== "string" || !/^[0-9a-f]{64}$/.test(step)) throw new TypeError("no hash");
      return new Uint8Array(Buffer.from(step, "hex"));
    });
  } catch (cause) {
    throw new Refusal(3, [`${address.href} answered with something that is no proof`], { cause });
  }
}
