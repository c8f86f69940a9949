import { setTimeout as sleep } from "node:timers/promises";
import postgres from "postgres";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { appendEntries } from "./append";
import { listen } from "./listen";
import type { StoreEvent } from "./listen";
import { openCampaign } from "./open-campaign";
import type { Store } from "./open-store";
import { opening, openTestStore, system } from "./testing/sample-campaign";
import { createTestDatabase } from "./testing/test-database";
import type { TestDatabase } from "./testing/test-database";

let database: TestDatabase;
let store: Store;
beforeAll(async () => {
  database = await createTestDatabase();
  store = await openTestStore(database.url);
  await openCampaign(store, { coordinator: null, campaign: opening("hum") });
});
afterAll(async () => {
  await store.close();
  await database.drop();
});

const join = (key: string) =>
  appendEntries(store, {
    campaign: "hum",
    by: system,
    entries: [{ kind: "team.joined", payload: { key } }],
  });

async function until(condition: () => boolean): Promise<void> {
  for (let tries = 0; !condition() && tries < 1000; tries += 1) await sleep(10);
}

describe("listening", () => {
  it("hears every append once, also after its connection was lost", async () => {
    const heard: StoreEvent[] = [];
    const unlisten = await listen(store, (event) => heard.push(event));
    await join("one");
    await until(() => heard.length === 1);
    expect(heard).toEqual([{ campaign: "hum", size: 2, what: "appended" }]);

    const admin = postgres(database.adminUrl, { max: 1 });
    await admin`
      select pg_terminate_backend(pid) from pg_stat_activity
      where datname = current_database() and query ilike 'listen%'`;
    await admin.end();
    // What happened meanwhile is told when it listens again.
    await join("two");
    await until(() => heard.some(({ size }) => size === 3));
    await join("three");
    await until(() => heard.some(({ size }) => size === 4));
    expect(heard.map(({ size }) => size)).toContain(3);
    expect(heard.at(-1)).toEqual({ campaign: "hum", size: 4, what: "appended" });
    await unlisten();
  });
});
