import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { evidencesOf } from "@weighhouse/engine/evidences";
import { scoreCampaign as scoreDocument } from "@weighhouse/engine/score";
import { createState } from "@weighhouse/engine/state";
import { ENGINE_VERSION, STATE_VERSION } from "@weighhouse/engine/version";
import { appendEntries } from "@weighhouse/store/append";
import type { NewEntry } from "@weighhouse/store/append";
import { findCampaign } from "@weighhouse/store/campaigns";
import { openCampaign } from "@weighhouse/store/open-campaign";
import type { Store } from "@weighhouse/store/open-store";
import { postMeasurements } from "@weighhouse/store/post-measurements";
import { readDocument } from "@weighhouse/store/read-document";
import { readState } from "@weighhouse/store/save-scoring";
import { readStandings, readTimeline } from "@weighhouse/store/standings";
import {
  declarations,
  hum,
  opening,
  openTestStore,
  system,
} from "@weighhouse/store/testing/sample-campaign";
import { createTestDatabase } from "@weighhouse/store/testing/test-database";
import type { TestDatabase } from "@weighhouse/store/testing/test-database";
import { scoreCampaign } from "./score-campaign";

const engine = ENGINE_VERSION;
let database: TestDatabase;
let store: Store;
beforeAll(async () => {
  database = await createTestDatabase();
  store = await openTestStore(database.url);
});
afterAll(async () => {
  await store.close();
  await database.drop();
});

/** The transactions of one campaign, one after another: hypotheses and measurements, all mixed. */
const transactions: ((campaign: string) => Promise<unknown>)[] = [
  (campaign) => openCampaign(store, { coordinator: null, campaign: opening(campaign) }),
  append(...declarations),
  append({
    kind: "hypothesis.registered",
    payload: {
      key: "singing-grains",
      title: "Each grain sings",
      predictions: [
        { measurand: "pitch-dry", expected: 110, tolerance: { family: "normal", sd: 8 } },
      ],
    },
  }),
  post(hum("a", 96), hum("b", 101)),
  post(hum("c", 94, { facility: null })),
  append({ kind: "team.joined", payload: { key: "wind" } }),
  append({ kind: "measurement.set-aside", payload: { id: "b", reason: "a lorry passed" } }),
  append({
    kind: "measurement.corrected",
    payload: { measurement: hum("c", 95), reason: "read off again" },
  }),
  append({
    kind: "measurements.withdrawn",
    payload: { selection: { by: "ids", ids: ["a"] }, reason: "of another dune" },
  }),
  post(hum("d", 97, { observedAt: "2044-05-02T10:00:00Z" })),
  append({
    kind: "hypothesis.registered",
    payload: {
      key: "late-thought",
      title: "Filed after data",
      predictions: [{ measurand: "pitch-dry", expected: 96 }],
    },
  }),
  post(hum("e", 95), hum("f", 93)),
];

function append(...entries: NewEntry[]) {
  return (campaign: string) => appendEntries(store, { campaign, by: system, entries });
}

function post(...measurements: Record<string, unknown>[]) {
  return (campaign: string) => postMeasurements(store, { campaign, by: system, measurements });
}

/** What the engine makes of the whole document as of a size, from nothing. */
async function freshStandings(campaign: string, size: number) {
  const { document, treeHead } = await readDocument(store, campaign, size);
  const scored = scoreDocument(document, { asOf: { size, treeHead } });
  return scored.ok ? scored.value : null;
}

async function freshEvidences(campaign: string, size: number) {
  const { document } = await readDocument(store, campaign, size);
  const state = createState(document);
  return state.ok ? evidencesOf(state.value) : null;
}

describe("scoring a campaign", () => {
  it("after each transaction gives what scoring the whole document gives", async () => {
    for (const transaction of transactions) {
      await transaction("stepwise");
      await scoreCampaign(store, "stepwise");
      const { size } = await findCampaign(store, "stepwise");
      const kept = await readStandings(store, { campaign: "stepwise", size, engine });
      expect(kept?.standings).not.toBeNull();
      expect(kept?.standings).toEqual(await freshStandings("stepwise", size));
      const state = await readState(store, {
        campaign: "stepwise",
        engine,
        stateVersion: STATE_VERSION,
      });
      expect(state?.size).toBe(size);
    }
  });

  it("leaves a step for each transaction that changed measurements or hypotheses", async () => {
    const timeline = await readTimeline(store, { campaign: "stepwise", engine });
    expect(timeline.map(({ movedBy }) => movedBy.kind)).toEqual([
      "hypothesis.registered",
      "hypothesis.registered",
      "measurements.posted",
      "measurements.posted",
      "measurement.set-aside",
      "measurement.corrected",
      "measurements.withdrawn",
      "measurements.posted",
      "hypothesis.registered",
      "measurements.posted",
    ]);
    for (const { size, points } of timeline) {
      expect(points).toEqual(await freshEvidences("stepwise", size));
    }
  });

  it("of a burst gives the same timeline and standings as step by step", async () => {
    for (const transaction of transactions) await transaction("burst");
    await scoreCampaign(store, "burst");
    const steps = async (campaign: string) =>
      (await readTimeline(store, { campaign, engine })).map((step) => ({ ...step, at: "" }));
    expect(await steps("burst")).toEqual(await steps("stepwise"));
    const latest = await readStandings(store, { campaign: "burst", size: "latest", engine });
    const { size } = await findCampaign(store, "burst");
    expect(latest?.standings).toEqual(await freshStandings("burst", size));
  });

  it("with another version's state starts anew", async () => {
    await store.sql`update scorer_states set state = '{"version":-1}'`;
    await post(hum("g", 98))("burst");
    await scoreCampaign(store, "burst");
    const { size } = await findCampaign(store, "burst");
    const latest = await readStandings(store, { campaign: "burst", size, engine });
    expect(latest?.standings).toEqual(await freshStandings("burst", size));
  });

  it("that the engine refuses keeps the problems, and the steps before them", async () => {
    await openCampaign(store, {
      coordinator: null,
      campaign: opening("refused"),
      entries: declarations,
    });
    await append(
      {
        kind: "observable.declared",
        payload: { key: "gusts", title: "Gusts", unit: "m/s", scale: "linear" },
      },
      {
        kind: "measurand.declared",
        payload: {
          key: "gusts-june",
          observable: "gusts",
          reference: { family: "normal", mean: 4, sd: 1e200 },
        },
      },
    )("refused");
    await post(hum("a", 96))("refused");
    await post({ id: "n", measurand: "gusts-june", value: 3, sd: 1 })("refused");
    await scoreCampaign(store, "refused");
    const latest = await readStandings(store, { campaign: "refused", size: "latest", engine });
    const { size } = await findCampaign(store, "refused");
    expect(latest).toMatchObject({ size, standings: null });
    expect(latest?.problems?.map(({ code }) => code)).toContain("out-of-range");
    // The step before it came to be stands.
    const timeline = await readTimeline(store, { campaign: "refused", engine });
    expect(timeline.map(({ movedBy }) => movedBy.kind)).toContain("hypothesis.registered");
  });
});
