import type { Payload } from "@weighhouse/campaign/entries";
import type { Entry } from "@weighhouse/ledger/entry";
import { applyAll, CHANNEL, keepHead, readsOfAll, requireGoingOn } from "./append";
import type { Appended, Clock } from "./append";
import { planFreshly } from "./compare-staged";
import { extendLedger } from "./extend-ledger";
import type { Extended } from "./extend-ledger";
import { lockTip } from "./lock-tip";
import type { Tip } from "./lock-tip";
import type { Store } from "./open-store";
import { currentRows, writeRows } from "./projection-rows";
import { Projector } from "./projector";
import type { Queries } from "./queries";
import { queueScoring } from "./scoring-queue";
import { StoreError } from "./store-error";
import type { Upload } from "./uploads";

export type EnterInput = {
  upload: Upload;
  by: Entry["by"];
  /** The size up to which the staged rows were compared with the campaign. */
  comparedAt: number;
  clock?: Clock | undefined;
};

type Prepared = {
  part: number;
  entry: number;
  firstLine: number;
  lastLine: number;
  rows: number;
  sha256: string;
  dated: string;
};

/**
 * Enters what is staged, compared and in no conflict, in one transaction: all of it or nothing. Under
 * the campaign's lock only that is done which hangs on the entries' places and time; texts and digests
 * are there, and the rows go from table to table.
 *
 * The entries' rules are asked of those measurements that can change anything beside themselves: for
 * each entry and measurand the first that may be its earliest. What the rules ask of the others, that
 * nobody has their ids and that their measurands are there, is true of all: ids are compared by the
 * joins, up to `comparedAt` before the lock and from there under it, and of each measurand one
 * measurement is asked.
 *
 * @returns null where an id has come since: then compare again
 * @throws {StoreError} `rule-broken`, `clock-not-simulated`, `no-signer`, `restored`
 */
export async function enterStaged(
  store: Store,
  input: EnterInput,
): Promise<(Appended & { lockedMs: number }) | null> {
  const { upload } = input;
  const prepared = await store.sql<Prepared[]>`
    select part, entry, first_line as "firstLine", last_line as "lastLine", rows, sha256, dated
    from staged_entries
    where campaign_id = ${upload.campaignId} and upload = ${upload.upload} order by part, entry`;
  let lockedAt = 0;
  const appended = (await store.sql.begin(async (tx) => {
    await planFreshly(tx);
    const tip = await lockTip(tx, upload.campaign);
    lockedAt = performance.now();
    requireGoingOn(store, tip);
    if (tip.size > input.comparedAt && (await isTaken(tx, input))) return null;
    return writeStaged(store, tx, { ...input, tip, prepared });
  })) as Appended | null;
  if (appended === null) return null;
  const lockedMs = performance.now() - lockedAt;
  await keepHead(store, appended.note);
  return { ...appended, lockedMs };
}

async function isTaken(tx: Queries, { upload, comparedAt }: EnterInput): Promise<boolean> {
  const { campaignId } = upload;
  const [row] = await tx<{ taken: boolean }[]>`
    select exists (
      select 1 from measurements m
      where m.campaign_id = ${campaignId} and m.from_size > ${comparedAt}
        and m.id in (
          select s.id from staged_measurements s
          where s.campaign_id = ${campaignId} and s.upload = ${upload.upload}::uuid
            and s.entry is not null)
    ) as taken`;
  return row!.taken;
}

async function writeStaged(
  store: Store,
  tx: Queries,
  input: EnterInput & { tip: Tip; prepared: Prepared[] },
): Promise<Appended> {
  const { tip, prepared, by, clock } = input;
  const payloads = prepared.map(({ sha256, dated }) => ({
    kind: "measurements.posted" as const,
    value: datedPayload(dated),
    text: "",
    sha256,
  }));
  const extended = extendLedger(store, { tip, by, payloads, clock });
  const projector = await projectDated(tx, input, { payloads, extended });
  const placed = { ...input, extended };
  await Promise.all([
    insertEntries(tx, placed),
    ...extended.writeTree(tx),
    insertMeasurements(tx, placed),
    ...writeRows(tx, tip.campaignId, {
      made: projector.made.filter(({ part }) => part !== "measurement"),
      closed: projector.closed,
    }),
    queueScoring(tx, tip.campaign),
    tx`select pg_notify(${CHANNEL}, ${JSON.stringify({
      campaign: tip.campaign,
      size: extended.size,
      what: "appended",
    })})`,
  ]);
  const { size, entries, treeHead, note } = extended;
  return { from: tip.size, to: size, at: entries.map(({ at }) => at), treeHead, note };
}

function datedPayload(dated: string): Payload<"measurements.posted"> {
  const measurements = JSON.parse(dated) as Payload<"measurements.posted">["measurements"];
  return { measurements, correlations: [] };
}

type Payloads = Parameters<typeof applyAll>[2]["payloads"];

/** Asks the rules, and finds what the entries do to the measurands. */
async function projectDated(
  tx: Queries,
  { by, tip, clock }: EnterInput & { tip: Tip },
  { payloads, extended }: { payloads: Payloads; extended: Extended },
): Promise<Projector> {
  const telling = payloads.flatMap((payload, index) => {
    const { measurements } = payload.value as Payload<"measurements.posted">;
    return measurements.length > 0 ? [{ payload, entry: extended.entries[index]! }] : [];
  });
  const asked = telling.map(({ payload }) => payload);
  const reads = readsOfAll(asked);
  const projector = new Projector({ rows: await currentRows(tx, tip.campaignId, reads), reads });
  const entries = telling.map(({ entry }) => entry);
  applyAll(projector, entries, { tip, by, payloads: asked, clock });
  return projector;
}

type Placed = EnterInput & { tip: Tip; prepared: Prepared[]; extended: Extended };

async function insertEntries(tx: Queries, input: Placed): Promise<void> {
  const { upload, by, prepared, extended } = input;
  const author = "system" in by ? { member: null, team: null } : by;
  const { count } = await tx`
    insert into entries
      (campaign_id, seq, version, at, member, team, kind, payload, payload_sha256)
    select ${upload.campaignId}::int, p.seq, 1, p.at, ${author.member}::text, ${author.team}::text,
      'measurements.posted', s.payload, s.sha256
    from unnest(
      ${prepared.map(({ part }) => part)}::int[], ${prepared.map(({ entry }) => entry)}::int[],
      ${extended.entries.map(({ seq }) => seq)}::int[],
      ${extended.entries.map(({ at }) => at)}::timestamptz[]
    ) as p(part, entry, seq, at)
    join staged_entries s on s.campaign_id = ${upload.campaignId} and s.upload = ${upload.upload}::uuid
      and s.part = p.part and s.entry = p.entry
    order by p.seq`;
  requireAll(count, prepared.length);
}

/** Whoever took staged rows away meanwhile: then nothing is entered. */
function requireAll(found: number, expected: number): void {
  if (found === expected) return;
  throw new StoreError(
    "no-such-upload",
    `found ${found} of ${expected} of what was staged; allowed is all of it: send it again`,
  );
}

/** Row by row where they lie: each entry's rows are found by their lines. */
async function insertMeasurements(tx: Queries, input: Placed): Promise<void> {
  const { upload, prepared, extended } = input;
  const { campaignId } = upload;
  const { count } = await tx`
    insert into measurements
      (campaign_id, id, from_size, to_size, first_seq, first_place, measurand, facility, team,
      batch, observed_at, posted_at, value, sd, unit, set_aside, withdrawn, content)
    select ${campaignId}::int, s.id, p.seq + 1, null, p.seq, s.place, s.measurand, s.facility, s.team,
      s.batch, s.observed_at, p.at, s.value, s.sd, s.unit, s.set_aside, false,
      (s.head || p.posted || s.tail)::json
    from unnest(
      ${prepared.map(({ part }) => part)}::int[], ${prepared.map(({ entry }) => entry)}::int[],
      ${prepared.map(({ firstLine }) => firstLine)}::int[],
      ${prepared.map(({ lastLine }) => lastLine)}::int[],
      ${extended.entries.map(({ seq }) => seq)}::int[],
      ${extended.entries.map(({ at }) => at)}::timestamptz[],
      ${extended.entries.map(({ at }) => `"postedAt":"${at}",`)}::text[]
    ) as p(part, entry, first_line, last_line, seq, at, posted)
    cross join lateral (
      select * from staged_measurements m
      where m.campaign_id = ${campaignId} and m.upload = ${upload.upload}::uuid and m.part = p.part
        and m.line between p.first_line and p.last_line and m.entry = p.entry
      offset 0
    ) s`;
  requireAll(
    count,
    prepared.reduce((sum, { rows }) => sum + rows, 0),
  );
}
