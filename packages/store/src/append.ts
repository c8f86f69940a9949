import { CampaignError } from "@weighhouse/campaign/campaign-error";
import type { EntryKind } from "@weighhouse/campaign/entries";
import { readsOf } from "@weighhouse/campaign/reads";
import type { Reads } from "@weighhouse/campaign/reads";
import type { Entry } from "@weighhouse/ledger/entry";
import type { Queries } from "./queries";
import type { Clock } from "./clock";
import { extendLedger } from "./extend-ledger";
import type { WriteInput } from "./extend-ledger";
import { queueDates } from "./dates-queue";
import { lockTip } from "./lock-tip";
import type { Tip } from "./lock-tip";
import type { Store } from "./open-store";
import { preparePayload } from "./prepare-payload";
import type { PreparedPayload } from "./prepare-payload";
import { currentRows, writeRows } from "./projection-rows";
import { Projector } from "./projector";
import { queueScoring } from "./scoring-queue";
import { restored } from "./restored";
import { StoreError } from "./store-error";

export type { Clock } from "./clock";

export type NewEntry = { kind: EntryKind; payload: unknown };

export type Appended = {
  /** The entries are [from, to). */
  from: number;
  to: number;
  /** `at` of each entry, in order. */
  at: string[];
  /** Root of the tree of size `to`, base64, as in the third line of the signed head. */
  treeHead: string;
  /** The signed head of the tree of size `to`. */
  note: string;
};

export type AppendInput = {
  campaign: string;
  by: Entry["by"];
  entries: NewEntry[];
  clock?: Clock | undefined;
  /** The size that the caller's decision was made on; if the ledger has grown since: `moved-on`. */
  expectedSize?: number | undefined;
  /** What else the transaction writes: what is held of a seal, and held no longer. */
  alongside?: Alongside | undefined;
};

export type Alongside = (tx: Queries, campaignId: number) => Promise<unknown>;

/** Name of the channel on which every append and scoring is told. */
export const CHANNEL = "weighhouse";

/**
 * Appends entries to a campaign's ledger in one transaction: clock and seq under the campaign's
 * lock, tree, signed head, projections, the scoring job and the notice. All of it or nothing.
 *
 * @throws {StoreError} `no-such-campaign`, `invalid-payload`, `payload-too-large`, `moved-on`,
 * `rule-broken`, `clock-not-simulated`, `no-signer`, `restored`
 */
export async function appendEntries(store: Store, input: AppendInput): Promise<Appended> {
  const payloads = input.entries.map(preparePayload);
  const appended = (await store.sql.begin(async (tx) => {
    const tip = await lockTip(tx, input.campaign);
    if (input.expectedSize !== undefined && input.expectedSize !== tip.size) {
      throw new StoreError(
        "moved-on",
        `found the ledger at size ${tip.size}; allowed is ${input.expectedSize}, on which this was decided`,
      );
    }
    await input.alongside?.(tx, tip.campaignId);
    return writeEntries(store, tx, { tip, by: input.by, payloads, clock: input.clock });
  })) as Appended;
  await keepHead(store, appended.note);
  return appended;
}

/**
 * Keeps a committed head outside the database. The entries are on record by now, whatever becomes of
 * this, so that a full disk is logged and the append not called failed.
 */
export async function keepHead(store: Store, note: string): Promise<void> {
  try {
    await store.keptHeads?.keep(note);
  } catch (error) {
    store.log.error({ error }, "could not keep the last signed head outside the database");
  }
}

/** The rest of an append, once the tip is locked. Statements that need no answer go out together. */
export async function writeEntries(
  store: Store,
  tx: Queries,
  input: WriteInput,
): Promise<Appended> {
  const { tip, payloads } = input;
  requireGoingOn(store, tip);
  const extended = extendLedger(store, input);
  const reads = readsOfAll(payloads);
  const projector = new Projector({ rows: await currentRows(tx, tip.campaignId, reads), reads });
  applyAll(projector, extended.entries, input);
  await Promise.all([
    ...extended.write(tx),
    ...writeRows(tx, tip.campaignId, projector),
    ...visibilityWrites(tx, tip.campaignId, payloads),
    queueScoring(tx, tip.campaign),
    ...queueDates(tx, tip.campaign, payloads),
    tx`select pg_notify(${CHANNEL}, ${JSON.stringify({
      campaign: tip.campaign,
      size: extended.size,
      what: "appended",
    })})`,
  ]);
  return {
    from: tip.size,
    to: extended.size,
    at: extended.entries.map((entry) => entry.at),
    treeHead: extended.treeHead,
    note: extended.note,
  };
}

/** A database put back to a backup while this process runs is found before anything is added to it. */
export function requireGoingOn(store: Store, { ledger, campaign, size }: Tip): void {
  const kept = store.keptHeads?.last(ledger) ?? null;
  if (kept !== null && kept.size > size) throw restored([{ campaign, kept, size }]);
}

export function readsOfAll(payloads: PreparedPayload[]): Reads {
  const all = payloads.map(({ kind, value }) =>
    readsOf({ kind, payload: value } as Parameters<typeof readsOf>[0]),
  );
  return {
    keys: all.flatMap(({ keys }) => keys),
    whole: [...new Set(all.flatMap(({ whole }) => whole))],
    facilities: [...new Set(all.flatMap(({ facilities }) => facilities))],
  };
}

/** The rules are asked here once more, under the lock: who decided before it may be out of date. */
export function applyAll(
  projector: Projector,
  entries: Entry[],
  { by, payloads }: WriteInput,
): void {
  try {
    for (const [index, { seq, at }] of entries.entries()) {
      const { kind, value: payload } = payloads[index] as PreparedPayload;
      projector.apply({ seq, at, by, kind, payload });
    }
  } catch (cause) {
    if (!(cause instanceof CampaignError) || cause.code !== "rule-broken") throw cause;
    const problems = cause.problem === null ? [] : [cause.problem];
    throw new StoreError("rule-broken", cause.message, { cause, problems });
  }
}

/** Who may read is no part of the document, so it stands in the campaign's own row. */
function visibilityWrites(tx: Queries, campaignId: number, payloads: PreparedPayload[]) {
  const last = payloads.findLast(({ kind }) => kind === "campaign.amended");
  if (last === undefined) return [];
  const { visibility } = last.value as { visibility: string };
  return [tx`update campaigns set visibility = ${visibility} where id = ${campaignId}`];
}
