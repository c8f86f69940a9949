import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { appendEntries } from "./append";
import { findCampaign } from "./campaigns";
import { openCampaign } from "./open-campaign";
import type { Store } from "./open-store";
import { defaultMeasurementId, postMeasurements } from "./post-measurements";
import { readDocument } from "./read-document";
import { declarations, hum, opening, openTestStore, system } from "./testing/sample-campaign";
import { createTestDatabase } from "./testing/test-database";
import type { TestDatabase } from "./testing/test-database";

let database: TestDatabase;
let store: Store;
beforeAll(async () => {
  database = await createTestDatabase();
  store = await openTestStore(database.url);
  await openCampaign(store, { coordinator: null, campaign: opening("hum"), entries: declarations });
});
afterAll(async () => {
  await store.close();
  await database.drop();
});

const post = (...measurements: Record<string, unknown>[]) =>
  postMeasurements(store, { campaign: "hum", by: system, measurements });

describe("posting measurements", () => {
  it("twice is posting them once", async () => {
    const first = await post(hum("a", 96), hum("b", 93));
    expect(first).toMatchObject({ posted: ["a", "b"], alreadyThere: [], conflicts: [] });
    const { size } = await findCampaign(store, "hum");
    const second = await post(hum("b", 93), hum("a", 96, { status: "final" }));
    expect(second).toEqual({
      posted: [],
      alreadyThere: ["b", "a"],
      conflicts: [],
      appended: null,
    });
    expect((await findCampaign(store, "hum")).size).toBe(size);
  });

  it("with other content under a known id changes nothing and names the field", async () => {
    const { size } = await findCampaign(store, "hum");
    const posted = await post(hum("new", 90), hum("a", 97, { batch: "dusk" }));
    expect(posted).toMatchObject({
      posted: [],
      conflicts: [
        { id: "a", field: "batch", there: null, posted: "dusk" },
        { id: "a", field: "value", there: 96, posted: 97 },
      ],
      appended: null,
    });
    expect((await findCampaign(store, "hum")).size).toBe(size);
  });

  it("posts what is new beside what is already there", async () => {
    const posted = await post(hum("a", 96), hum("c", 99), hum("c", 99));
    expect(posted).toMatchObject({ posted: ["c"], alreadyThere: ["a", "c"], conflicts: [] });
  });

  it("compares with what was posted, not with what became of it", async () => {
    const setAside = { id: "c", reason: "wind" };
    await appendEntries(store, {
      campaign: "hum",
      by: system,
      entries: [{ kind: "measurement.set-aside", payload: setAside }],
    });
    expect(await post(hum("c", 99))).toMatchObject({ alreadyThere: ["c"], conflicts: [] });
  });

  it("gives a measurement without an id one made of what it says", async () => {
    const { id: _, ...nameless } = hum("", 91);
    const id = defaultMeasurementId(nameless);
    expect(id).toMatch(/^east-mast:2044-06-01T10:00:00Z:[0-9a-f]{12}$/);
    expect(defaultMeasurementId({ ...nameless, status: "final" })).toBe(id);
    expect(defaultMeasurementId({ ...nameless, value: 92 })).not.toBe(id);
    expect((await post(nameless)).posted).toEqual([id]);
    expect((await post(nameless)).alreadyThere).toEqual([id]);
  });

  it("posts correlations once, and another coefficient is a conflict", async () => {
    const pair = (coefficient: number) => ({
      campaign: "hum",
      by: system,
      measurements: [hum("p", 94), hum("q", 95)],
      correlations: [{ a: "p", b: "q", coefficient }],
    });
    await postMeasurements(store, pair(0.5));
    expect(await postMeasurements(store, pair(0.5))).toMatchObject({
      conflicts: [],
      appended: null,
    });
    expect((await postMeasurements(store, pair(0.6))).conflicts).toEqual([
      { id: "p q", field: "coefficient", there: 0.5, posted: 0.6 },
    ]);
  });

  it("splits more than an entry holds over entries of one transaction, in order", async () => {
    const many = Array.from({ length: 2500 }, (_, index) => hum(`many-${index}`, 90 + index / 500));
    const { appended } = await post(...many);
    expect((appended?.to ?? 0) - (appended?.from ?? 0)).toBe(3);
    const { document } = await readDocument(store, "hum");
    const ids = document.measurements.map(({ id }) => id).filter((id) => id.startsWith("many-"));
    expect(ids).toEqual(many.map(({ id }) => id));
  });

  it("points into the whole posting, wherever the fault lies", async () => {
    const many = Array.from({ length: 1201 }, (_, index) => hum(`later-${index}`, 90));
    await expect(post(...many.slice(0, 1200), hum("later-1200", Number.NaN))).rejects.toMatchObject(
      {
        code: "invalid-payload",
        problems: [{ pointer: "/measurements/1200/value" }],
      },
    );
  });
});
