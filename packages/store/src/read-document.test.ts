import { afterAll, beforeAll, expect, it } from "vitest";
import { measurementContentSchema } from "@weighhouse/campaign/entries";
import { findCampaign } from "./campaigns";
import { openCampaign } from "./open-campaign";
import type { Store } from "./open-store";
import { comparePosting, postMeasurements } from "./post-measurements";
import { readDeclarations, readDocument } from "./read-document";
import { declarations, hum, opening, openTestStore, system } from "./testing/sample-campaign";
import { createTestDatabase } from "./testing/test-database";
import type { TestDatabase } from "./testing/test-database";

let database: TestDatabase;
let store: Store;
beforeAll(async () => {
  database = await createTestDatabase();
  store = await openTestStore(database.url);
  await openCampaign(store, { coordinator: null, campaign: opening("hum"), entries: declarations });
  await postMeasurements(store, {
    campaign: "hum",
    by: system,
    measurements: [hum("a", 96), hum("b", 93)],
    correlations: [{ a: "a", b: "b", coefficient: 0.5 }],
  });
});
afterAll(async () => {
  await store.close();
  await database.drop();
});

it("the declarations are the newest document without measurements, dates of measurands kept", async () => {
  const whole = await readDocument(store, "hum");
  const { document, size } = await readDeclarations(store, "hum");
  expect(size).toBe(whole.size);
  expect(document).toEqual({ ...whole.document, measurements: [], correlations: [] });
  expect(document.measurands[0]?.firstPostedAt).not.toBeNull();
});

it("what a posting would find is what posting finds, and is found without posting", async () => {
  const { size } = await findCampaign(store, "hum");
  const rows = [hum("a", 96), hum("b", 94), hum("c", 95)];
  const measurements = rows.map((row) => measurementContentSchema.parse(row));
  const found = await comparePosting(store, { campaign: "hum", measurements });
  expect((await findCampaign(store, "hum")).size).toBe(size);
  const posted = await postMeasurements(store, { campaign: "hum", by: system, measurements });
  expect(found).toEqual({ alreadyThere: posted.alreadyThere, conflicts: posted.conflicts });
  expect(found).toEqual({
    alreadyThere: ["a"],
    conflicts: [{ id: "b", field: "value", there: 93, posted: 94 }],
  });
});
