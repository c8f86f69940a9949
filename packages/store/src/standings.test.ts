import { afterAll, beforeAll, describe, expect, it } from "vitest";
import type { Problem } from "@weighhouse/campaign/problem";
import type { Standings } from "@weighhouse/campaign/standings";
import { appendEntries } from "./append";
import { findCampaign } from "./campaigns";
import { openCampaign } from "./open-campaign";
import type { Store } from "./open-store";
import { postMeasurements } from "./post-measurements";
import { readDocument } from "./read-document";
import { readState, saveScoring } from "./save-scoring";
import type { Scoring } from "./save-scoring";
import { readPosted, readTransactions } from "./scoring-input";
import { queueUnscored } from "./scoring-queue";
import { readStandings, readTimeline, saveStandings } from "./standings";
import { declarations, hum, opening, openTestStore, system } from "./testing/sample-campaign";
import { createTestDatabase } from "./testing/test-database";
import type { TestDatabase } from "./testing/test-database";

const engine = "9.9.9";
const campaign = "hum";
let database: TestDatabase;
let store: Store;

beforeAll(async () => {
  database = await createTestDatabase();
  store = await openTestStore(database.url);
  await openCampaign(store, {
    coordinator: null,
    campaign: opening(campaign),
    entries: declarations,
  });
  const post = (...measurements: Record<string, unknown>[]) =>
    postMeasurements(store, { campaign, by: system, measurements });
  await post(hum("a", 96, { unit: null }), hum("b", 94, { facility: null }));
  await appendEntries(store, {
    campaign,
    by: system,
    entries: [
      { kind: "facility.declared", payload: { key: "west-mast" } },
      { kind: "measurement.set-aside", payload: { id: "a", reason: "wind" } },
    ],
  });
  await appendEntries(store, {
    campaign,
    by: system,
    entries: [{ kind: "team.joined", payload: { key: "wind" } }],
  });
  await postMeasurements(store, {
    campaign,
    by: system,
    measurements: [hum("c", 95), hum("d", 95)],
    correlations: [{ a: "c", b: "d", coefficient: 0.5 }],
  });
});
afterAll(async () => {
  await store.close();
  await database.drop();
});

const standingsNamed = (name: string) =>
  ({
    campaign: name,
    measurements: { counted: 0, setAside: 0 },
    hypotheses: [],
  }) as unknown as Standings;
const problem: Problem = {
  pointer: "/measurands/0",
  code: "not-yet-supported",
  found: "a curve",
  allowed: "a constant",
};

describe("the scorer's input", () => {
  it("is the transactions in order, with what moved each", async () => {
    const transactions = await readTransactions(store, { campaign, after: 0, limit: 100 });
    expect(transactions.map(({ begin, size }) => [begin, size])).toEqual([
      [0, 6],
      [6, 7],
      [7, 9],
      [9, 10],
      [10, 11],
    ]);
    expect(transactions.map(({ movedBy }) => movedBy)).toEqual([
      { seq: 5, kind: "hypothesis.registered", facilities: [], measurements: 0 },
      { seq: 6, kind: "measurements.posted", facilities: ["east-mast"], measurements: 2 },
      { seq: 8, kind: "measurement.set-aside", facilities: ["east-mast"], measurements: 1 },
      null,
      { seq: 10, kind: "measurements.posted", facilities: ["east-mast"], measurements: 2 },
    ]);
    // The third did something else beside setting aside, the last brought a correlation as well.
    expect(transactions.map(({ change }) => change)).toEqual([
      "document",
      "posted",
      "document",
      "document",
      "document",
    ]);
    const { treeHead } = await readDocument(store, campaign, 7);
    expect(transactions[1]?.treeHead).toBe(treeHead);
    const later = await readTransactions(store, { campaign, after: 7, limit: 1 });
    expect(later).toEqual(transactions.slice(2, 3));
  });

  it("is the posted measurements alone, completed as in the document", async () => {
    const posted = await readPosted(store, { campaign, begin: 6, size: 7 });
    const { document } = await readDocument(store, campaign, 7);
    expect(posted).toEqual(document.measurements);
    expect(posted[0]?.unit).toBe("Hz");
  });
});

describe("what a scoring made", () => {
  const scoring = (size: number, more: Partial<Scoring> = {}): Scoring => ({
    campaign,
    size,
    engine,
    outcome: { standings: standingsNamed(`of ${size}`), problems: null },
    steps: [],
    stateVersion: 1,
    state: `state of ${size}`,
    ...more,
  });

  it("is read back by size, or the latest", async () => {
    await saveScoring(store, scoring(7));
    await saveScoring(store, scoring(9));
    const latest = await readStandings(store, { campaign, size: "latest", engine });
    expect(latest).toMatchObject({ size: 9, standings: { campaign: "of 9" }, problems: null });
    const older = await readStandings(store, { campaign, size: 7, engine });
    expect(older?.standings).toEqual(standingsNamed("of 7"));
    expect(await readStandings(store, { campaign, size: 8, engine })).toBeNull();
    const other = { campaign, size: "latest" as const, engine: "0.0.1" };
    expect(await readStandings(store, other)).toBeNull();
  });

  it("is never replaced by an older state", async () => {
    await saveScoring(store, scoring(8));
    const place = { campaign, engine };
    expect(await readState(store, { ...place, stateVersion: 1 })).toEqual({
      size: 9,
      state: "state of 9",
    });
    expect(await readState(store, { ...place, stateVersion: 2 })).toBeNull();
    await saveScoring(store, scoring(9, { stateVersion: 2 }));
    expect(await readState(store, { ...place, stateVersion: 1 })).toBeNull();
  });

  it("may be why there are no standings", async () => {
    await saveScoring(
      store,
      scoring(10, { outcome: { standings: null, problems: [problem] }, state: null }),
    );
    const latest = await readStandings(store, { campaign, size: "latest", engine });
    expect(latest).toMatchObject({ size: 10, standings: null, problems: [problem] });
    await saveStandings(store, { campaign, size: 6, engine, problems: [problem] });
    expect(await readStandings(store, { campaign, size: 6, engine })).toMatchObject({
      problems: [problem],
    });
  });

  it("holds a step of the timeline once, in order, up to the size that is asked for", async () => {
    const step = (size: number, lnEvidence: number | null) => ({
      size,
      at: `2044-06-01T00:00:0${size % 10}.000000Z`,
      movedBy: {
        seq: size - 1,
        kind: "measurements.posted",
        facilities: ["east-mast"],
        measurements: 2,
      },
      points: [
        { hypothesis: "resonant-layer", lnEvidence },
        { hypothesis: "noModel", lnEvidence: -1.5 },
      ],
    });
    await saveScoring(store, scoring(9, { steps: [step(6, 0), step(7, -2.25)] }));
    await saveScoring(store, scoring(9, { steps: [step(7, -2.25), step(9, null)] }));
    const timeline = await readTimeline(store, { campaign, engine });
    expect(timeline).toEqual([step(6, 0), step(7, -2.25), step(9, null)]);
    expect(await readTimeline(store, { campaign, engine, size: 7 })).toEqual(timeline.slice(0, 2));
  });

  it("leaves a campaign queued while its latest size is not scored", async () => {
    expect(await queueUnscored(store, engine)).toEqual([campaign]);
    const { size } = await findCampaign(store, campaign);
    await saveScoring(store, scoring(size));
    expect(await queueUnscored(store, engine)).toEqual([]);
    expect(await queueUnscored(store, "10.0.0")).toEqual([campaign]);
  });
});
