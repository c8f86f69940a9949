import { setTimeout as sleep } from "node:timers/promises";
import { afterAll, beforeAll, expect, it } from "vitest";
import { exportAuditTrail } from "@weighhouse/desk/export-audit-trail";
import { createPrivateKeyPem, signerFromPem } from "@weighhouse/ledger/node-keys";
import { appendEntries } from "@weighhouse/store/append";
import { openCampaign } from "@weighhouse/store/open-campaign";
import { connect, openStore } from "@weighhouse/store/open-store";
import type { Store } from "@weighhouse/store/open-store";
import { readHeads } from "@weighhouse/store/read-ledger";
import { missingTimeStamps, readTimeStamps, TIME_STAMP_TASK } from "@weighhouse/store/time-stamps";
import { declarations, opening } from "@weighhouse/store/testing/sample-campaign";
import { createTestDatabase } from "@weighhouse/store/testing/test-database";
import type { TestDatabase } from "@weighhouse/store/testing/test-database";
import { TestAuthority } from "@weighhouse/timestamps/testing/authority";
import { runScorer } from "./run-scorer";
import { timeStampTask } from "./time-stamp-task";

// The authority is OpenSSL's `ts` command behind HTTP on loopback, its certificates made for the run.

let database: TestDatabase;
let store: Store;
const authority = new TestAuthority();
const by = { system: true } as const;
beforeAll(async () => {
  database = await createTestDatabase();
  const signer = signerFromPem(createPrivateKeyPem(), "house.example");
  store = await openStore({ url: database.url, signer, connections: 4 });
  const campaign = opening("dune");
  await openCampaign(store, { coordinator: null, campaign, entries: declarations });
  const close = { kind: "registration.closed" as const, payload: { by: "coordinator" } };
  await appendEntries(store, { campaign: "dune", by, entries: [close] });
  const team = { kind: "team.joined" as const, payload: { key: "wind" } };
  await appendEntries(store, { campaign: "dune", by, entries: [team] });
});
afterAll(async () => {
  await store.close();
  await database.drop();
  authority.remove();
});

const stamps = () => readTimeStamps(store, { campaign: "dune", size: 100 });

it("heads at registration's close and of the day are missed until the authority is there", async () => {
  const missing = [
    { campaign: "dune", size: 7, because: "registration" },
    { campaign: "dune", size: 8, because: "daily" },
  ];
  expect(await missingTimeStamps(store)).toEqual(missing);
  const nowhere = { url: "http://127.0.0.1:1/", trusted: authority.root };
  const scorer = await runScorer(store, { authority: nowhere });
  let tried: { attempts: number; last_error: string | null }[] = [];
  for (let tries = 0; tries < 200 && !(tried[0]?.last_error ?? null); tries += 1) {
    await sleep(50);
    tried = await store.sql`
      select attempts, last_error from graphile_worker.jobs
      where task_identifier = ${TIME_STAMP_TASK} order by last_error nulls last`;
  }
  await scorer.stop();
  expect(tried).toHaveLength(2);
  expect(tried[0]?.last_error).toContain("fetch failed");
  expect(await missingTimeStamps(store, "dune")).toEqual(missing);
  expect(await stamps()).toEqual([]);
});

it("the queue has them stamped once it answers, and the archive holds what OpenSSL verifies", async () => {
  const served = await authority.serve();
  await store.sql`
    select graphile_worker.reschedule_jobs(
      array(select id from graphile_worker.jobs where task_identifier = ${TIME_STAMP_TASK}), now())`;
  const scorer = await runScorer(store, {
    authority: { url: served.url, trusted: authority.root },
  });
  for (let tries = 0; tries < 200 && (await stamps()).length < 2; tries += 1) await sleep(50);
  await scorer.stop();
  await served.close();
  expect(await missingTimeStamps(store)).toEqual([]);
  const notes = new Map(
    (await readHeads(store, { campaign: "dune" })).map((h) => [h.size, h.note]),
  );
  const stamped = await stamps();
  expect(stamped.map(({ size, authority: who }) => [size, who])).toEqual([
    [7, "Test authority"],
    [8, "Test authority"],
  ]);
  for (const { size, token } of stamped) {
    expect(authority.verifies(token, new TextEncoder().encode(notes.get(size)))).toBe(true);
  }
  const { bytes } = await exportAuditTrail({ store }, null, { key: "dune" });
  expect(Buffer.from(bytes).includes("heads/0000000007.tsr")).toBe(true);
});

it("a head is stamped again a day later, if there is another by then", async () => {
  const team = { kind: "team.joined" as const, payload: { key: "moisture" } };
  await appendEntries(store, { campaign: "dune", by, entries: [team] });
  expect(await missingTimeStamps(store)).toEqual([]);
  const owner = connect(database.adminUrl, 1);
  await owner`update time_stamps set at = at - interval '25 hours'`;
  await owner.end();
  expect(await missingTimeStamps(store)).toEqual([{ campaign: "dune", size: 9, because: "daily" }]);
});

it("an answer that isn't good is not kept, and says why", async () => {
  const stranger = new TestAuthority("Stranger");
  const served = await stranger.serve();
  const asking = { url: served.url, trusted: authority.root };
  await expect(timeStampTask(store, asking, { campaign: "dune", size: 9 })).rejects.toThrow(
    "gave no good time-stamp: its certificates lead to none that you trust",
  );
  await served.close();
  stranger.remove();
  expect((await stamps()).map(({ size }) => size)).toEqual([7, 8]);
});
