import { afterAll, beforeAll, describe, expect, it } from "vitest";
import type { LedgerRecord } from "@weighhouse/campaign/changes";
import { foldRecords } from "@weighhouse/campaign/fold";
import { base64 } from "@weighhouse/ledger/bytes";
import { leafHash, payloadDigest } from "@weighhouse/ledger/entry";
import { nodeHasher } from "@weighhouse/ledger/node-hasher";
import { createPrivateKeyPem, signerFromPem } from "@weighhouse/ledger/node-keys";
import { appendLeaf, emptyEdge, rootOf } from "@weighhouse/ledger/tree";
import { openCampaign } from "@weighhouse/store/open-campaign";
import { openStore } from "@weighhouse/store/open-store";
import type { Store } from "@weighhouse/store/open-store";
import { postMeasurements } from "@weighhouse/store/post-measurements";
import type { Posted } from "@weighhouse/store/post-measurements";
import { readDocument } from "@weighhouse/store/read-document";
import { readHeads, streamEntries } from "@weighhouse/store/read-ledger";
import type { StoredEntry } from "@weighhouse/store/read-ledger";
import { rebuildProjections } from "@weighhouse/store/rebuild";
import { declarations, hum, opening, system } from "@weighhouse/store/testing/sample-campaign";
import { createTestDatabase } from "@weighhouse/store/testing/test-database";
import type { TestDatabase } from "@weighhouse/store/testing/test-database";

const POSTERS = 8;
const POSTINGS = 125;
/** Every fifth posting has an id that all posters post, with the same content. */
const isShared = (posting: number) => posting % 5 === 0;
const distinct = POSTERS * 100 + 25;

let database: TestDatabase;
const stores: Store[] = [];
let outcomes: Posted[] = [];

// Each poster is a store of its own, with its own connections, as separate processes have.
beforeAll(async () => {
  database = await createTestDatabase();
  const signer = signerFromPem(createPrivateKeyPem(), "house.example");
  for (let poster = 0; poster < POSTERS; poster += 1) {
    stores.push(await openStore({ url: database.url, signer, connections: 2 }));
  }
  const campaign = opening("hum");
  await openCampaign(stores[0]!, { coordinator: null, campaign, entries: declarations });
  const from = performance.now();
  outcomes = (await Promise.all(stores.map(postAll))).flat();
  const seconds = (performance.now() - from) / 1000;
  console.info(
    `${POSTERS} posters, ${outcomes.length} postings in ${seconds.toFixed(1)} s: ${Math.round(outcomes.length / seconds)} a second`,
  );
});
afterAll(async () => {
  await Promise.all(stores.map((store) => store.close()));
  await database.drop();
});

async function postAll(store: Store, poster: number): Promise<Posted[]> {
  const posted: Posted[] = [];
  for (let posting = 0; posting < POSTINGS; posting += 1) {
    const id = isShared(posting) ? `shared-${posting}` : `poster-${poster}-${posting}`;
    posted.push(
      await postMeasurements(store, {
        campaign: "hum",
        by: system,
        measurements: [hum(id, 90 + posting / 10)],
      }),
    );
  }
  return posted;
}

async function allEntries(): Promise<StoredEntry[]> {
  const all: StoredEntry[] = [];
  for await (const each of streamEntries(stores[0]!, { campaign: "hum" })) all.push(each);
  return all;
}

describe("eight posters on one campaign", () => {
  it("post a thousand times without a conflict, each shared id once", () => {
    expect(outcomes).toHaveLength(POSTERS * POSTINGS);
    expect(outcomes.flatMap(({ conflicts }) => conflicts)).toEqual([]);
    const posted = outcomes.flatMap((outcome) => outcome.posted);
    expect(posted).toHaveLength(distinct);
    expect(new Set(posted).size).toBe(distinct);
    expect(outcomes.flatMap(({ alreadyThere }) => alreadyThere)).toHaveLength(7 * 25);
  });

  it("leave no gap, no duplicate, and time that only goes forward", async () => {
    const all = await allEntries();
    expect(all).toHaveLength(1 + declarations.length + distinct);
    expect(all.map(({ entry }) => entry.seq)).toEqual(all.map((_, index) => index));
    const times = all.map(({ entry }) => entry.at);
    expect(times).toEqual([...new Set(times)].sort());
  });

  it("leave every signed root equal to a fresh tree over the entries", async () => {
    const roots = new Map<number, string>();
    let edge = emptyEdge();
    for (const { entry, payload } of await allEntries()) {
      expect(payloadDigest(nodeHasher, payload)).toBe(entry.payloadSha256);
      edge = appendLeaf(nodeHasher, edge, leafHash(nodeHasher, entry)).edge;
      roots.set(edge.size, base64(rootOf(nodeHasher, edge)));
    }
    const heads = await readHeads(stores[0]!, { campaign: "hum" });
    expect(heads).toHaveLength(1 + distinct);
    for (const head of heads) expect(head.root).toBe(roots.get(head.size));
  });

  it("leave the document that a fresh fold gives, and projections that a rebuild proves", async () => {
    const records = (await allEntries()).map(
      ({ entry, payload }) =>
        ({ ...entry, payload: JSON.parse(payload) as unknown }) as unknown as LedgerRecord,
    );
    const { document } = await readDocument(stores[0]!, "hum");
    expect(document).toEqual(foldRecords(records));
    expect(await rebuildProjections(stores[0]!, "hum")).toEqual({ same: true, differences: [] });
  });
});
