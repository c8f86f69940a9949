import type { Edge } from "@weighhouse/ledger/tree";
import type { Queries } from "./queries";
import { StoreError } from "./store-error";

/** A campaign's tip row, locked until the transaction ends, and the clock read under that lock. */
export type Tip = {
  campaignId: number;
  campaign: string;
  ledger: string;
  clock: "real" | "simulated";
  size: number;
  edge: Edge;
  /** Microseconds since 1970. */
  lastAt: bigint;
  now: bigint;
};

type TipRow = Omit<Tip, "edge" | "lastAt" | "now"> & { edge: Buffer; lastAt: string };

/** @throws {StoreError} `no-such-campaign` */
export async function lockTip(tx: Queries, campaign: string): Promise<Tip> {
  // The second statement runs once the first has its lock: so the clock is read under it.
  const [tips, times] = await Promise.all([
    tx<TipRow[]>`
      select c.id as "campaignId", c.key as campaign, c.ledger, c.clock, t.size, t.edge,
        (extract(epoch from t.last_at) * 1000000)::bigint as "lastAt"
      from campaigns c join tips t on t.campaign_id = c.id
      where c.key = ${campaign} for update of t`,
    tx<{ now: string }[]>`
      select (extract(epoch from clock_timestamp()) * 1000000)::bigint as now`,
  ]);
  const [row] = tips;
  if (row === undefined) {
    throw new StoreError("no-such-campaign", `found no campaign ${JSON.stringify(campaign)}`);
  }
  return {
    ...row,
    edge: { size: row.size, hashes: splitHashes(row.edge) },
    lastAt: BigInt(row.lastAt),
    now: BigInt(times[0]?.now ?? 0),
  };
}

function splitHashes(joined: Uint8Array): Uint8Array[] {
  const hashes: Uint8Array[] = [];
  for (let begin = 0; begin < joined.length; begin += 32) {
    hashes.push(new Uint8Array(joined.subarray(begin, begin + 32)));
  }
  return hashes;
}
