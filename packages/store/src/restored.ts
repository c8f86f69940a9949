import { base64, sameBytes } from "@weighhouse/ledger/bytes";
import type { TreeHead } from "@weighhouse/ledger/tree-head";
import type { Sql } from "postgres";
import type { KeptHeads } from "./kept-heads";
import { StoreError } from "./store-error";

/** A ledger that isn't the continuation of the last head kept outside the database. */
export type Behind = {
  /** The campaign's key; null: the database has no such ledger. */
  campaign: string | null;
  kept: TreeHead;
  /** The ledger's size in the database. */
  size: number;
};

/** The ledgers whose database was restored from before the last head kept, or changed otherwise. */
export async function findBehind(sql: Sql, keptHeads: KeptHeads): Promise<Behind[]> {
  const behind: Behind[] = [];
  for (const kept of keptHeads.all()) {
    const [row] = await sql<{ campaign: string; size: number; root: Uint8Array | null }[]>`
      select c.key as campaign, t.size, h.root
      from campaigns c join tips t on t.campaign_id = c.id
      left join heads h on h.campaign_id = c.id and h.size = ${kept.size}
      where c.ledger = ${kept.origin}`;
    const root = row?.root ?? null;
    const same = row !== undefined && root !== null && sameBytes(root, kept.root);
    if (!same) behind.push({ campaign: row?.campaign ?? null, kept, size: row?.size ?? 0 });
  }
  return behind;
}

/** @throws {StoreError} `restored`: nothing is appended until the operator declares the restore */
export async function requireNotBehind(sql: Sql, keptHeads: KeptHeads): Promise<void> {
  const behind = await findBehind(sql, keptHeads);
  if (behind.length > 0) throw restored(behind);
}

export function restored(behind: Behind[]): StoreError {
  return new StoreError(
    "restored",
    `found a database that does not go on from the last signed heads kept outside it, as one restored from a backup: ${behind.map(inWords).join("; ")}. Allowed is to restore a newer backup, or to put it on record: npm start -- declare-restore "the reason"`,
  );
}

function inWords({ campaign, kept, size }: Behind): string {
  const head = `the head kept is of ${kept.size} entries with the root ${base64(kept.root)}`;
  if (campaign === null) return `no ledger ${kept.origin}, where ${head}`;
  if (size < kept.size) return `${campaign} has ${size} entries, where ${head}`;
  return `${campaign} has ${size} entries with other ones among the first ${kept.size}, where ${head}`;
}
