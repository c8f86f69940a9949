import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { foldRecords } from "@weighhouse/campaign/fold";
import type { LedgerRecord } from "@weighhouse/campaign/changes";
import { leafHash, payloadDigest } from "@weighhouse/ledger/entry";
import { nodeHasher } from "@weighhouse/ledger/node-hasher";
import { base64 } from "@weighhouse/ledger/bytes";
import { appendLeaf, emptyEdge, rootOf } from "@weighhouse/ledger/tree";
import { verifyTreeHead } from "@weighhouse/ledger/tree-head";
import { decodeVerifierKey } from "@weighhouse/ledger/verifier-key";
import postgres from "postgres";
import { appendEntries } from "./append";
import { openCampaign } from "./open-campaign";
import type { Store } from "./open-store";
import { postMeasurements } from "./post-measurements";
import { readDocument } from "./read-document";
import { readHeads, readSigningKeys, streamEntries } from "./read-ledger";
import type { StoredEntry } from "./read-ledger";
import { rebuildProjections } from "./rebuild";
import { SCORE_TASK } from "./scoring-queue";
import { declarations, hum, opening, openTestStore, system } from "./testing/sample-campaign";
import { createTestDatabase } from "./testing/test-database";
import type { TestDatabase } from "./testing/test-database";

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

async function entriesOf(campaign: string): Promise<StoredEntry[]> {
  const all: StoredEntry[] = [];
  for await (const each of streamEntries(store, { campaign })) all.push(each);
  return all;
}

function recordOf({ entry, payload }: StoredEntry): LedgerRecord {
  return { ...entry, payload: JSON.parse(payload) as unknown } as unknown as LedgerRecord;
}

describe("an append", () => {
  it("gives entries without gaps, in strictly increasing time, under signed heads", async () => {
    await openCampaign(store, {
      coordinator: null,
      campaign: opening("hum"),
      entries: declarations,
    });
    await postMeasurements(store, {
      campaign: "hum",
      by: system,
      measurements: [hum("a", 96), hum("b", 93)],
    });
    const all = await entriesOf("hum");
    expect(all.map(({ entry }) => entry.seq)).toEqual(all.map((_, index) => index));
    const times = all.map(({ entry }) => entry.at);
    expect(times).toEqual([...new Set(times)].sort());
    let edge = emptyEdge();
    for (const { entry, payload } of all) {
      expect(payloadDigest(nodeHasher, payload)).toBe(entry.payloadSha256);
      edge = appendLeaf(nodeHasher, edge, leafHash(nodeHasher, entry)).edge;
    }
    const heads = await readHeads(store, { campaign: "hum" });
    expect(heads.map((head) => head.size)).toEqual([6, 7]);
    expect(heads.at(-1)?.root).toBe(base64(rootOf(nodeHasher, edge)));
    const keys = (await readSigningKeys(store)).map(decodeVerifierKey);
    for (const head of heads) expect(verifyTreeHead(head.note, keys).ok).toBe(true);
  });

  it("leaves projections that give the fold's document at every size", async () => {
    await appendEntries(store, {
      campaign: "hum",
      by: system,
      entries: [
        { kind: "measurement.set-aside", payload: { id: "a", reason: "a lorry passed" } },
        { kind: "registration.closed", payload: { by: "coordinator" } },
      ],
    });
    const all = await entriesOf("hum");
    for (let size = 1; size <= all.length; size += 1) {
      const read = await readDocument(store, "hum", size);
      expect(read.document).toEqual(foldRecords(all.slice(0, size).map(recordOf)));
      let edge = emptyEdge();
      for (const { entry } of all.slice(0, size)) {
        edge = appendLeaf(nodeHasher, edge, leafHash(nodeHasher, entry)).edge;
      }
      expect(read.treeHead).toBe(base64(rootOf(nodeHasher, edge)));
      expect(read.at).toBe(all[size - 1]?.entry.at);
    }
    await expect(readDocument(store, "hum", all.length + 1)).rejects.toMatchObject({
      code: "no-such-size",
    });
  });

  it("refuses a decision that was made on an older size", async () => {
    const entry = { kind: "team.joined" as const, payload: { key: "wind" } };
    await expect(
      appendEntries(store, { campaign: "hum", by: system, entries: [entry], expectedSize: 3 }),
    ).rejects.toMatchObject({ code: "moved-on" });
  });

  it("refuses a payload with its pointer, and a campaign's key that is taken", async () => {
    const entry = { kind: "team.joined" as const, payload: { key: "Wind" } };
    await expect(
      appendEntries(store, { campaign: "hum", by: system, entries: [entry] }),
    ).rejects.toMatchObject({ code: "invalid-payload", problems: [{ pointer: "/key" }] });
    await expect(
      openCampaign(store, { coordinator: null, campaign: opening("hum") }),
    ).rejects.toMatchObject({ code: "campaign-exists" });
  });

  it("refuses an entry that breaks a rule, whoever decided on it, and leaves nothing of its transaction", async () => {
    const before = await entriesOf("hum");
    const wider = {
      ...(declarations[1]?.payload as object),
      reference: { family: "uniform", lower: 0, upper: 900 },
    };
    await expect(
      appendEntries(store, {
        campaign: "hum",
        by: system,
        entries: [
          { kind: "team.joined", payload: { key: "wind" } },
          { kind: "measurand.declared", payload: wider },
        ],
      }),
    ).rejects.toMatchObject({
      code: "rule-broken",
      message: expect.stringContaining("entry 10, measurand.declared: /reference") as string,
      problems: [{ pointer: "/reference", code: "contradiction" }],
    });
    expect(await entriesOf("hum")).toEqual(before);
    expect((await rebuildProjections(store, "hum")).same).toBe(true);
  });

  it("takes another clock only where entry 0 says that it is simulated", async () => {
    const clock = () => "2044-05-01T00:00:00.000000Z";
    await openCampaign(store, {
      coordinator: null,
      campaign: opening("played"),
      entries: declarations,
      clock,
    });
    const [first, second] = await entriesOf("played");
    expect(JSON.parse(first?.payload ?? "")).toMatchObject({ clock: "simulated" });
    expect(second?.entry.at).toBe("2044-05-01T00:00:00.000001Z");
    await expect(
      appendEntries(store, {
        campaign: "hum",
        by: system,
        entries: [{ kind: "team.joined", payload: { key: "wind" } }],
        clock,
      }),
    ).rejects.toMatchObject({ code: "clock-not-simulated" });
  });

  it("queues one scoring for a burst of postings", async () => {
    const jobs = await store.sql<{ key: string }[]>`
      select key from graphile_worker.jobs where task_identifier = ${SCORE_TASK}`;
    expect(jobs.map(({ key }) => key).sort()).toEqual(["score:hum", "score:played"]);
  });
});

describe("the ledger's tables", () => {
  const tables = ["entries", "nodes", "heads"];
  const statements = tables.flatMap((table) => [
    `update ${table} set campaign_id = campaign_id`,
    `delete from ${table}`,
    // Without cascade another table's reference would refuse first, for a reason of its own.
    `truncate ${table} cascade`,
  ]);

  it.each(statements)("refuse the running role: %s", async (statement) => {
    await expect(store.sql.unsafe(statement)).rejects.toThrow(/permission denied/);
  });

  it.each(statements)("refuse even their owner: %s", async (statement) => {
    const owner = postgres(database.adminUrl, { max: 1 });
    await expect(owner.unsafe(statement)).rejects.toThrow(/only ever appended to/);
    await owner.unsafe("set session_replication_role = replica");
    await expect(owner.unsafe(statement)).rejects.toThrow(/only ever appended to/);
    await owner.end();
  });
});

describe("a rebuild", () => {
  it("proves untouched projections the same", async () => {
    expect(await rebuildProjections(store, "hum")).toEqual({ same: true, differences: [] });
  });

  it("names each row that was tampered with, and puts it right", async () => {
    const before = await readDocument(store, "hum");
    await store.sql`
      update measurements set content = replace(content::text, '93', '94')::json where id = 'b'`;
    await store.sql`delete from parts where part = 'team'`;
    const { same, differences } = await rebuildProjections(store, "hum");
    expect(same).toBe(false);
    expect(differences.map(({ table, key }) => `${table} ${key}`)).toEqual([
      "parts team grain-size 5",
      "measurements b 7",
    ]);
    expect(await readDocument(store, "hum")).toEqual(before);
    expect((await rebuildProjections(store, "hum")).same).toBe(true);
  });
});
