import type { LedgerRecord } from "@weighhouse/campaign/changes";
import { lockTip } from "./lock-tip";
import type { Store } from "./open-store";
import { writeRows } from "./projection-rows";
import { Projector } from "./projector";
import type { Queries } from "./queries";

/** A row that wasn't as the entries say; both sides as text, null where there is no row. */
export type Difference = {
  table: string;
  key: string;
  found: string | null;
  expected: string | null;
};

/**
 * Rebuilds a campaign's projections from its entries alone, says where those in the database
 * differed, and puts the rebuilt ones in their place if any did. Appends wait meanwhile.
 */
export async function rebuildProjections(
  store: Store,
  campaign: string,
): Promise<{ same: boolean; differences: Difference[] }> {
  return store.sql.begin(async (tx) => {
    const { campaignId } = await lockTip(tx, campaign);
    const projector = new Projector();
    for await (const record of records(tx, campaignId)) {
      projector.apply(record);
    }
    // Names of their own: a statement that an append prepared on this connection would go on
    // writing to the table that it was prepared for, whatever came to stand before it.
    await tx`create temporary table rebuilt_parts (like parts) on commit drop`;
    await tx`create temporary table rebuilt_measurements (like measurements) on commit drop`;
    const target = { parts: "rebuilt_parts", measurements: "rebuilt_measurements" };
    await Promise.all(writeRows(tx, campaignId, projector, target));
    const differences = [
      ...(await differencesIn(tx, campaignId, "parts", ["part", "key", "from_size"])),
      ...(await differencesIn(tx, campaignId, "measurements", ["id", "from_size"])),
    ];
    if (differences.length > 0) {
      for (const table of ["parts", "measurements"]) {
        await tx`delete from ${tx(table)} where campaign_id = ${campaignId}`;
        await tx`insert into ${tx(table)} select * from ${tx(`rebuilt_${table}`)}`;
      }
    }
    return { same: differences.length === 0, differences };
  }) as Promise<{ same: boolean; differences: Difference[] }>;
}

type EntryRow = Omit<LedgerRecord, "by" | "payload"> & {
  member: string | null;
  team: string | null;
  payload: string;
};

/** The entries as the transaction that holds the lock sees them, a thousand at a time. */
async function* records(tx: Queries, campaignId: number): AsyncGenerator<LedgerRecord> {
  for (let from = 0; ; from += 1000) {
    const rows = await tx<EntryRow[]>`
      select seq, at, member, team, kind, payload from entries
      where campaign_id = ${campaignId} and seq >= ${from} and seq < ${from + 1000} order by seq`;
    if (rows.length === 0) return;
    for (const { seq, at, member, team, kind, payload } of rows) {
      const by = member === null ? ({ system: true } as const) : { member, team };
      yield { seq, at, by, kind, payload: JSON.parse(payload) as unknown };
    }
  }
}

async function differencesIn(
  tx: Queries,
  campaignId: number,
  table: string,
  key: string[],
): Promise<Difference[]> {
  const keyText = tx.unsafe(key.map((column) => `${column}::text`).join(", "));
  const side = (name: string) => tx`
    select array_to_string(array[${keyText}], ' ') as key, t::text as row
    from ${tx(name)} t where campaign_id = ${campaignId}`;
  return tx<Difference[]>`
    select ${table} as table, key, found.row as found, expected.row as expected
    from (${side(table)}) found full join (${side(`rebuilt_${table}`)}) expected using (key)
    where found.row is distinct from expected.row order by key`;
}
