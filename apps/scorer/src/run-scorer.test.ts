import { spawn } from "node:child_process";
import type { ChildProcess } from "node:child_process";
import path from "node:path";
import { setTimeout as sleep } from "node:timers/promises";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { ENGINE_VERSION } from "@weighhouse/engine/version";
import { findCampaign } from "@weighhouse/store/campaigns";
import { listen } from "@weighhouse/store/listen";
import type { StoreEvent } from "@weighhouse/store/listen";
import { openCampaign } from "@weighhouse/store/open-campaign";
import type { Store } from "@weighhouse/store/open-store";
import { postMeasurements } from "@weighhouse/store/post-measurements";
import { SCORE_TASK } from "@weighhouse/store/scoring-queue";
import { readStandings } from "@weighhouse/store/standings";
import {
  declarations,
  hum,
  opening,
  openTestStore,
  system,
} from "@weighhouse/store/testing/sample-campaign";
import { createTestDatabase } from "@weighhouse/store/testing/test-database";
import type { TestDatabase } from "@weighhouse/store/testing/test-database";
import { runScorer } from "./run-scorer";

const engine = ENGINE_VERSION;
const root = path.resolve(import.meta.dirname, "../../..");
let database: TestDatabase;
let store: Store;
beforeAll(async () => {
  database = await createTestDatabase();
  store = await openTestStore(database.url);
  for (const key of ["one", "two"]) {
    await openCampaign(store, { coordinator: null, campaign: opening(key), entries: declarations });
  }
});
afterAll(async () => {
  await store.close();
  await database.drop();
});

const post = (campaign: string, id: string) =>
  postMeasurements(store, { campaign, by: system, measurements: [hum(id, 95)] });

async function scoredToTheEnd(campaign: string): Promise<boolean> {
  const { size } = await findCampaign(store, campaign);
  const latest = await readStandings(store, { campaign, size: "latest", engine });
  return latest?.size === size;
}

async function until(condition: () => Promise<boolean>, what: string): Promise<void> {
  for (let tries = 0; tries < 1500; tries += 1) {
    if (await condition()) return;
    await sleep(20);
  }
  throw new Error(`waited in vain: ${what}`);
}

function startProcess(): ChildProcess {
  return spawn(process.execPath, ["--import", "tsx", "apps/scorer/src/scorer.ts"], {
    cwd: root,
    stdio: "ignore",
    env: { ...process.env, DATABASE_URL: database.url, LOG_LEVEL: "silent" },
  });
}

const ended = (child: ChildProcess) =>
  new Promise<number | null>((resolve) => child.once("close", resolve));

describe("scorers", () => {
  it("share campaigns, score every burst to its end and say so", async () => {
    const heard: StoreEvent[] = [];
    const unlisten = await listen(store, (event) => heard.push(event));
    const scorers = [await runScorer(store), await runScorer(store)];
    for (let index = 0; index < 20; index += 1) {
      await Promise.all(["one", "two"].map((key) => post(key, `burst-${index}`)));
    }
    await until(() => scoredToTheEnd("one"), "one");
    await until(() => scoredToTheEnd("two"), "two");
    const { size } = await findCampaign(store, "one");
    const told = { campaign: "one", size, what: "scored" };
    await until(
      async () => heard.some((event) => JSON.stringify(event) === JSON.stringify(told)),
      "the notice",
    );
    await Promise.all(scorers.map((scorer) => scorer.stop()));
    const locked = await store.sql`
      select locked_by from graphile_worker.jobs where locked_by is not null`;
    expect([...locked]).toEqual([]);
    await unlisten();
  });

  it("take up what came while none was there", async () => {
    await post("one", "meanwhile");
    await store.sql`select graphile_worker.remove_job('score:one')`;
    const scorer = await runScorer(store);
    await until(() => scoredToTheEnd("one"), "one");
    await scorer.stop();
  });

  it("free the job of one that was killed", async () => {
    // A job that a dead scorer holds: locked by a pool that no living session vouches for.
    await post("two", "orphan");
    await store.sql`
      update graphile_worker._private_jobs set locked_by = 'dead-pool', locked_at = now()`;
    const scorer = await runScorer(store, { everyMs: 200 });
    await until(async () => {
      const [row] = await store.sql<{ n: number }[]>`
        select count(*)::int as n from graphile_worker.jobs where task_identifier = ${SCORE_TASK}`;
      return row?.n === 0;
    }, "the job to be done");
    expect(await scoredToTheEnd("two")).toBe(true);
    await scorer.stop();
  });

  it("as processes end cleanly at SIGTERM, and their work goes on after a SIGKILL", async () => {
    const killed = startProcess();
    await post("one", "first");
    await until(() => scoredToTheEnd("one"), "one");
    killed.kill("SIGKILL");
    await ended(killed);
    const next = startProcess();
    await post("one", "second");
    await until(() => scoredToTheEnd("one"), "one again");
    const end = ended(next);
    next.kill("SIGTERM");
    expect(await end).toBe(0);
  });
});
