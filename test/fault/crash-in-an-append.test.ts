import { spawn } from "node:child_process";
import path from "node:path";
import { setTimeout as sleep } from "node:timers/promises";
import postgres from "postgres";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { base64 } from "@weighhouse/ledger/bytes";
import { leafHash } from "@weighhouse/ledger/entry";
import { nodeHasher } from "@weighhouse/ledger/node-hasher";
import { createPrivateKeyPem, signerFromPem } from "@weighhouse/ledger/node-keys";
import { appendLeaf, emptyEdge, rootOf } from "@weighhouse/ledger/tree";
import { isWriteAfterClose } from "@weighhouse/store/lost-connection";
import { openCampaign } from "@weighhouse/store/open-campaign";
import { openStore } from "@weighhouse/store/open-store";
import type { Store } from "@weighhouse/store/open-store";
import { postMeasurements } from "@weighhouse/store/post-measurements";
import { readDocument } from "@weighhouse/store/read-document";
import { readLatestHead, streamEntries } from "@weighhouse/store/read-ledger";
import { rebuildProjections } from "@weighhouse/store/rebuild";
import { declarations, hum, opening, system } from "@weighhouse/store/testing/sample-campaign";
import { createTestDatabase } from "@weighhouse/store/testing/test-database";
import type { TestDatabase } from "@weighhouse/store/testing/test-database";

const root = path.resolve(import.meta.dirname, "../..");
const pem = createPrivateKeyPem();
let database: TestDatabase;
let store: Store;
let admin: postgres.Sql;

beforeAll(async () => {
  // Connections are killed here, and postgres.js may throw outside of every call when they are.
  process.setUncaughtExceptionCaptureCallback((error) => {
    if (!isWriteAfterClose(error)) throw error;
  });
  database = await createTestDatabase();
  store = await openStore({ url: database.url, signer: signerFromPem(pem, "house.example") });
  admin = postgres(database.adminUrl, { max: 2 });
  await openCampaign(store, { coordinator: null, campaign: opening("hum"), entries: declarations });
});
afterAll(async () => {
  process.setUncaughtExceptionCaptureCallback(null);
  await store.close();
  await admin.end();
  await database.drop();
});

/** Everything that an append writes, counted. */
async function rows() {
  const [counts] = await admin`
    select (select count(*) from entries)::int as entries, (select count(*) from nodes)::int as nodes,
      (select count(*) from heads)::int as heads, (select size from tips) as tip,
      (select count(*) from parts)::int as parts,
      (select count(*) from measurements)::int as measurements`;
  return counts;
}

async function expectSoundLedger(): Promise<void> {
  let edge = emptyEdge();
  for await (const { entry } of streamEntries(store, { campaign: "hum" })) {
    expect(entry.seq).toBe(edge.size);
    edge = appendLeaf(nodeHasher, edge, leafHash(nodeHasher, entry)).edge;
  }
  const head = await readLatestHead(store, "hum");
  expect(head).toMatchObject({ size: edge.size, root: base64(rootOf(nodeHasher, edge)) });
  expect(await rebuildProjections(store, "hum")).toEqual({ same: true, differences: [] });
}

describe("a crash in the middle of an append", () => {
  it("leaves nothing behind when the connection dies after entries were written", async () => {
    const before = await rows();
    // The append writes entries and nodes, then waits at the heads, which another session holds.
    let release = () => {};
    const held = new Promise<void>((resolve) => (release = resolve));
    const holding = admin.begin(async (tx) => {
      await tx`lock table heads in exclusive mode`;
      await held;
    });
    const posting = postMeasurements(store, {
      campaign: "hum",
      by: system,
      measurements: [hum("lost", 91)],
    });
    const refused = expect(posting).rejects.toThrow();
    const pid = await waitingBackend();
    await admin`select pg_terminate_backend(${pid})`;
    await refused;
    release();
    await holding;
    expect(await rows()).toEqual(before);
    const posted = await postMeasurements(store, {
      campaign: "hum",
      by: system,
      measurements: [hum("lost", 91)],
    });
    expect(posted.posted).toEqual(["lost"]);
    await expectSoundLedger();
  });

  it("leaves whole postings or none when the posting process is killed", async () => {
    for (let round = 0; round < 3; round += 1) {
      const child = spawn(
        process.execPath,
        ["--import", "tsx", "test/fault/post-for-ever.ts", database.url, pem, `round-${round}`],
        { cwd: root, stdio: ["ignore", "pipe", "inherit"] },
      );
      await new Promise((resolve) => child.stdout.once("data", resolve));
      await sleep(50 + 70 * round);
      child.kill("SIGKILL");
      await new Promise((resolve) => child.once("close", resolve));
    }
    await expectSoundLedger();
    const { document } = await readDocument(store, "hum");
    const batches = new Map<string, number>();
    for (const { batch } of document.measurements) {
      if (batch !== null) batches.set(batch, (batches.get(batch) ?? 0) + 1);
    }
    expect(batches.size).toBeGreaterThan(3);
    for (const [batch, count] of batches) expect([batch, count]).toEqual([batch, 7]);
  });
});

async function waitingBackend(): Promise<number> {
  for (let tries = 0; tries < 1000; tries += 1) {
    const [row] = await admin<{ pid: number }[]>`
      select pid from pg_locks where relation = 'heads'::regclass and not granted`;
    if (row !== undefined) return row.pid;
    await sleep(10);
  }
  throw new Error("no append came to wait at the heads");
}
