import { randomBytes, randomUUID } from "node:crypto";
import { setTimeout as sleep } from "node:timers/promises";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import type { Actor } from "@weighhouse/desk/desk";
import { addMember } from "@weighhouse/desk/add-member";
import { sealPrediction } from "@weighhouse/desk/seal-prediction";
import { createPrivateKeyPem, signerFromPem } from "@weighhouse/ledger/node-keys";
import { DATES_TASK } from "@weighhouse/store/dates-queue";
import { openCampaign } from "@weighhouse/store/open-campaign";
import { openStore } from "@weighhouse/store/open-store";
import type { Store } from "@weighhouse/store/open-store";
import { readDocument } from "@weighhouse/store/read-document";
import { sealKeyOf } from "@weighhouse/store/seal-key";
import { declarations, opening } from "@weighhouse/store/testing/sample-campaign";
import { createTestDatabase } from "@weighhouse/store/testing/test-database";
import type { TestDatabase } from "@weighhouse/store/testing/test-database";
import { runScorer } from "./run-scorer";

let database: TestDatabase;
let store: Store;
const signer = signerFromPem(createPrivateKeyPem(), "house.example");
const prediction = {
  measurand: "pitch-wet",
  expected: 61,
  tolerance: { family: "normal" as const, sd: 2 },
};
const wet = {
  kind: "measurand.declared" as const,
  payload: {
    ...(declarations[1]!.payload as object),
    key: "pitch-wet",
    title: "In the wet season",
  },
};

beforeAll(async () => {
  database = await createTestDatabase();
  const sealKey = sealKeyOf(randomBytes(32));
  store = await openStore({ url: database.url, signer, sealKey, connections: 4 });
});
afterAll(async () => {
  await store.close();
  await database.drop();
});

/** A campaign with a held prediction that opens in less than a second, and no scorer running. */
async function sealedCampaign(key: string): Promise<void> {
  const userId = randomUUID();
  const email = `${key}@people.example`;
  await store.sql`insert into "user" (id, name, email) values (${userId}, ${key}, ${email})`;
  const actor: Actor = { userId, name: key };
  const entries = [...declarations, wet];
  await openCampaign(store, { coordinator: userId, campaign: opening(key), entries });
  await addMember({ store }, actor, { key, email, role: "coordinator", team: "grain-size" });
  const until = new Date(Date.now() + 900).toISOString();
  const seal = { keeping: "held" as const, prediction };
  await sealPrediction({ store }, actor, { key, hypothesis: "resonant-layer", until, seal });
}

async function isOpen(key: string): Promise<boolean> {
  const { document } = await readDocument(store, key);
  return document.hypotheses[0]!.predictions.some(({ measurand }) => measurand === "pitch-wet");
}

async function opensWithin(key: string, seconds: number): Promise<boolean> {
  for (let tries = 0; tries < seconds * 20; tries += 1) {
    if (await isOpen(key)) return true;
    await sleep(50);
  }
  return false;
}

describe("a scorer with the keys", () => {
  it("opens what fell due while nobody was there, from its job or without one", async () => {
    await sealedCampaign("on-time");
    await sealedCampaign("job-lost");
    await store.sql`
      select graphile_worker.complete_jobs(array(
        select id from graphile_worker.jobs
        where task_identifier = ${DATES_TASK} and key like 'dates:job-lost:%'))`;
    await sleep(1000);
    expect(await isOpen("on-time")).toBe(false);
    const withoutKeys = await runScorer({ ...store, signer: null });
    expect(await opensWithin("on-time", 1)).toBe(false);
    await withoutKeys.stop();
    const scorer = await runScorer(store);
    expect(await opensWithin("on-time", 10)).toBe(true);
    expect(await opensWithin("job-lost", 10)).toBe(true);
    await scorer.stop();
  });
});
