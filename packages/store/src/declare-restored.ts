import { base64 } from "@weighhouse/ledger/bytes";
import type { TreeHeadSigner } from "@weighhouse/ledger/tree-head";
import { appendEntries } from "./append";
import type { KeptHeads } from "./kept-heads";
import { openStore } from "./open-store";
import { findBehind } from "./restored";
import type { Behind } from "./restored";

/**
 * Puts on record, in each ledger that the database brought back, that it was restored and which head
 * was lost by it; the heads kept are put aside, so that the next start finds nothing to refuse.
 *
 * @returns the ledgers that were behind, with their sizes before the declaration
 */
export async function declareRestored(options: {
  url: string;
  signer: TreeHeadSigner;
  keptHeads: KeptHeads;
  reason: string;
}): Promise<Behind[]> {
  const { url, signer, keptHeads, reason } = options;
  // Opened without the kept heads, which it would be refused for.
  const store = await openStore({ url, signer, connections: 2 });
  try {
    const behind = await findBehind(store.sql, keptHeads);
    for (const { campaign, kept, size } of behind) {
      if (campaign !== null) {
        const payload = { before: kept.size, root: base64(kept.root), after: size, reason };
        const { note } = await appendEntries(store, {
          campaign,
          by: { system: true },
          entries: [{ kind: "ledger.restored", payload }],
          expectedSize: size,
        });
        keptHeads.giveUp(kept);
        await keptHeads.keep(note);
      } else {
        keptHeads.giveUp(kept);
      }
    }
    return behind;
  } finally {
    await store.close();
  }
}
