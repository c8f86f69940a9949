import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { foldRecords } from "@weighhouse/campaign/fold";
import type { LedgerRecord } from "@weighhouse/campaign/changes";
import { readDocument } from "@weighhouse/store/read-document";
import { streamEntries } from "@weighhouse/store/read-ledger";
import { rebuildProjections } from "@weighhouse/store/rebuild";
import { declareMeasurand, declareObservable } from "./declare";
import { postRows } from "./post-rows";
import { previewRows } from "./preview-rows";
import type { PreviewedRow } from "./previewed-rows";
import { readStandings } from "./read-standings";
import { registerHypothesis } from "./register-hypothesis";
import { inText } from "./row-source";
import type { RowSource } from "./row-source";
import { linePieces } from "./stage-lines";
import { hypothesis, openLagoon, reading } from "./testing/lagoon";
import type { Lagoon } from "./testing/lagoon";
import { openTestDesk } from "./testing/test-desk";
import type { TestDesk } from "./testing/test-desk";
import { withdrawMeasurements } from "./withdraw-measurements";

// More rows than are held at once: they go by the staging tables.
const MANY = 3200;

let house: TestDesk;
let lagoon: Lagoon;
let number = 0;
beforeAll(async () => {
  house = await openTestDesk();
});
afterAll(() => house.close());

async function openAnother(): Promise<void> {
  number += 1;
  lagoon = await openLagoon(house, { key: `many-${number}` });
  const { key, member } = lagoon;
  await registerHypothesis(house.desk, member, { key, hypothesis: hypothesis("algae", 40) });
}

const stream = (rows: object[]): RowSource => {
  async function* bytes() {
    const text = Buffer.from(rows.map((row) => `${JSON.stringify(row)}\n`).join(""));
    for (let at = 0; at < text.length; at += 65_536) yield text.subarray(at, at + 65_536);
  }
  return () => ({ pieces: linePieces(bytes()), columns: [], problems: [], place: inText("") });
};
const many = (count = MANY, more: (i: number) => object = () => ({})) =>
  Array.from({ length: count }, (_, i) => ({
    ...reading(`r-${i}`, 40 + (i % 13) / 7),
    observedAt: new Date(Date.UTC(2030, 0, 1) - ((i * 7919) % MANY) * 60_000).toISOString(),
    ...more(i),
  }));
const post = (rows: object[]) =>
  postRows(house.desk, lagoon.member, { key: lagoon.key, source: stream(rows) });
async function preview(rows: object[]) {
  const told: PreviewedRow[] = [];
  const { key, member } = lagoon;
  const row = (one: PreviewedRow) => void told.push(one);
  return { ...(await previewRows(house.desk, member, { key, source: stream(rows), row })), told };
}
const now = () => readDocument(house.desk.store, lagoon.key);

async function nothingStaged(): Promise<void> {
  for (const table of ["uploads", "staged_measurements", "staged_entries", "staged_fates"]) {
    const [row] = await house.desk.store.sql<{ n: number }[]>`
      select count(*)::int as n from ${house.desk.store.sql(table)}`;
    expect([table, row?.n]).toEqual([table, 0]);
  }
}

/** What is shown is what the ledger says, by the fold and by a rebuild. */
async function provesItself(): Promise<void> {
  const records: LedgerRecord[] = [];
  for await (const { entry, payload } of streamEntries(house.desk.store, {
    campaign: lagoon.key,
  })) {
    records.push({ ...entry, payload: JSON.parse(payload) as unknown } as unknown as LedgerRecord);
  }
  expect((await now()).document).toEqual(foldRecords(records));
  expect(await rebuildProjections(house.desk.store, lagoon.key)).toEqual({
    same: true,
    differences: [],
  });
}

describe("a stream of many rows", () => {
  it("is entered whole, at most 1,000 to an entry, and the same again is already there", async () => {
    await openAnother();
    const { size } = await now();
    const rows = many(MANY, (i) => (i % 3 === 0 ? { measurand: "full-moon" } : {}));
    const posted = await post(rows);
    expect(posted).toMatchObject({
      posted: MANY,
      alreadyThere: 0,
      appended: { from: size, to: size + Math.ceil(MANY / 1000) },
    });
    const { document } = await now();
    expect(document.measurements.map(({ id }) => id)).toEqual(rows.map(({ id }) => id));
    for await (const { payload } of streamEntries(house.desk.store, { campaign: lagoon.key })) {
      const { measurements = [] } = JSON.parse(payload) as { measurements?: unknown[] };
      expect(measurements.length).toBeLessThanOrEqual(1000);
    }
    await provesItself();
    expect(await post(rows)).toMatchObject({ posted: 0, alreadyThere: MANY, appended: null });
    expect((await now()).size).toBe(posted.appended?.to);
    await nothingStaged();
  });

  it("enters what is new of it, also beside what was withdrawn since", async () => {
    await openAnother();
    const rows = many();
    const first = rows.filter((_, i) => i % 5 === 2 || i < 1200);
    await post(first);
    const selection = { by: "ids" as const, ids: ["r-3", "r-7"] };
    const { key, member } = lagoon;
    await withdrawMeasurements(house.desk, member, { key, selection, reason: "a stuck shutter" });
    const again = await post(rows);
    expect(again).toMatchObject({
      posted: MANY - first.length,
      alreadyThere: first.length,
    });
    await provesItself();
    await nothingStaged();
  });

  it("with another content under one id near its end enters nothing, and says the field", async () => {
    await openAnother();
    await post([reading(`r-${MANY - 1}`, 99)]);
    const { size } = await now();
    await expect(post(many())).rejects.toMatchObject({
      code: "conflict",
      problems: [{ found: expect.stringMatching(/^r-3199 with observedAt/) as string }],
    });
    expect((await now()).size).toBe(size);
    await nothingStaged();
  });

  it("with faults anywhere enters nothing, and tells each with its line", async () => {
    await openAnother();
    const { size } = await now();
    const rows: object[] = many();
    rows[10] = { ...rows[10], sd: -1 };
    rows[11] = { ...rows[11], observedAt: "0000-01-01T00:00:00Z" };
    rows[2500] = { ...rows[2500], id: "r-5" };
    rows[3100] = { ...rows[3100], observedAt: "2099-01-01T00:00:00Z" };
    await expect(post(rows)).rejects.toMatchObject({
      code: "invalid",
      problems: [
        { found: expect.stringMatching(/\(line 11, column sd\)$/) as string },
        { found: expect.stringMatching(/\(line 12, column observedAt\)$/) as string },
        { found: "r-5, which line 6 has already (line 2501, column id)" },
        { found: expect.stringMatching(/\(line 3101, column observedAt\)$/) as string },
      ],
    });
    expect((await now()).size).toBe(size);
    await nothingStaged();
  });

  it("that breaks off half way leaves nothing", async () => {
    await openAnother();
    const { size } = await now();
    const whole = stream(many());
    const source: RowSource = (document) => {
      const { pieces, ...rest } = whole(document);
      async function* broken() {
        for await (const piece of pieces) {
          yield piece;
          throw new Error("the line went dead");
        }
      }
      return { ...rest, pieces: broken() };
    };
    const { key, member } = lagoon;
    await expect(postRows(house.desk, member, { key, source })).rejects.toThrow("went dead");
    expect((await now()).size).toBe(size);
    await nothingStaged();
  });

  it("of more faults than are told says how many there are", async () => {
    await openAnother();
    const rows = many(MANY, () => ({ sd: 0 }));
    const error = (await post(rows).catch((one: unknown) => one)) as { problems: object[] };
    expect(error.problems).toHaveLength(101);
    expect(error.problems.at(-1)).toMatchObject({ found: "3100 more rows that are refused" });
  });

  it("reports that no truth can give together are told, however far apart they lie", async () => {
    await openAnother();
    const { key, coordinator } = lagoon;
    const observable = { key: "lit", title: "Lit", scale: "event" as const };
    await declareObservable(house.desk, coordinator, { key, observable });
    await declareMeasurand(house.desk, coordinator, {
      key,
      measurand: { key: "lit-ever", observable: "lit" },
    });
    const report = { measurand: "lit-ever", value: undefined, sd: undefined };
    const rows: object[] = many();
    rows[1] = { ...rows[1], ...report, occurred: true };
    rows[3100] = { ...rows[3100], ...report, occurred: false };
    await expect(post(rows)).rejects.toMatchObject({
      problems: [{ found: expect.stringMatching(/^r-3100 and r-1, which no truth/) as string }],
    });
  });
});

describe("the preview of many rows", () => {
  it("tells each row's fate in order, and foretells what posting gives", async () => {
    await openAnother();
    await post([reading("r-0", 77), many()[1]!, many()[2]!]);
    const rows: object[] = many();
    const seen = await preview(rows);
    expect(seen.told.map(({ line }) => line)).toEqual(rows.map((_, i) => i + 1));
    expect(seen.told.slice(0, 4).map(({ fate }) => fate)).toEqual([
      "conflict",
      "alreadyThere",
      "alreadyThere",
      "new",
    ]);
    expect(seen.told[0]).toMatchObject({
      id: "r-0",
      measurand: "new-moon",
      conflict: { id: "r-0" },
    });
    expect(seen).toMatchObject({
      counts: { new: MANY - 3, alreadyThere: 2, conflict: 1, refused: 0 },
      postable: false,
      changes: null,
    });
    await nothingStaged();
    const good = rows.slice(1);
    const { changes } = await preview(good);
    await post(good);
    const { size } = await now();
    const { standings } = await readStandings(house.desk, null, { key: lagoon.key, size });
    expect({ ...standings, asOf: null }).toEqual(changes?.after);
  });
});
