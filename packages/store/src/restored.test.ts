import { mkdtempSync, readdirSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import path from "node:path";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { createPrivateKeyPem, signerFromPem } from "@weighhouse/ledger/node-keys";
import { parseTreeHead } from "@weighhouse/ledger/tree-head";
import postgres from "postgres";
import { appendEntries } from "./append";
import { declareRestored } from "./declare-restored";
import { KeptHeads } from "./kept-heads";
import { openCampaign } from "./open-campaign";
import { openStore } from "./open-store";
import { postMeasurements } from "./post-measurements";
import { readEntry, readLatestHead } from "./read-ledger";
import { declarations, hum, opening, system } from "./testing/sample-campaign";
import { createTestDatabase } from "./testing/test-database";
import type { TestDatabase } from "./testing/test-database";

const signer = signerFromPem(createPrivateKeyPem(), "house.example");
const keys = mkdtempSync(path.join(tmpdir(), "weighhouse-heads-"));
let database: TestDatabase;
beforeAll(async () => {
  database = await createTestDatabase();
});
afterAll(async () => {
  await database.drop();
  rmSync(keys, { recursive: true, force: true });
});

const open = () => openStore({ url: database.url, signer, keptHeads: new KeptHeads(keys) });
const team = (key: string) => ({ kind: "team.joined" as const, payload: { key, title: key } });
const append = (store: Awaited<ReturnType<typeof open>>, key: string) =>
  appendEntries(store, { campaign: "dune", by: system, entries: [team(key)] });

/** Copies the database as a whole, as a backup does, or puts such a copy in its place. */
async function copyDatabase(from: string, to: string): Promise<void> {
  const admin = new URL(database.adminUrl);
  admin.pathname = "/postgres";
  const sql = postgres(admin.href, { max: 1, onnotice: () => {} });
  try {
    await sql.unsafe(`drop database if exists ${to} with (force)`);
    await sql.unsafe(`create database ${to} template ${from}`);
  } finally {
    await sql.end();
  }
}

const heads = (ledger: string) => readdirSync(path.join(keys, "heads", ledger));

describe("a database restored from a backup", () => {
  const name = () => new URL(database.url).pathname.slice(1);
  let ledger = "";

  it("is refused at the start, in words that name the campaign and both sizes", async () => {
    const store = await open();
    const opened = await openCampaign(store, {
      coordinator: null,
      campaign: opening("dune"),
      entries: declarations,
    });
    ledger = opened.ledger;
    await store.close();
    await copyDatabase(name(), `${name()}_backup`);
    const later = await open();
    await append(later, "after-the-backup");
    const input = { campaign: "dune", by: system, measurements: [hum("m1", 90)] };
    await postMeasurements(later, input);
    await later.close();
    expect(heads(ledger)).toEqual(["0000000000000008.note"]);
    await copyDatabase(`${name()}_backup`, name());
    await expect(open()).rejects.toMatchObject({
      code: "restored",
      message: expect.stringMatching(
        /dune has 6 entries, where the head kept is of 8 entries.*declare-restore/,
      ) as string,
    });
  });

  it("is declared as an entry with the head that was lost, and appends go on", async () => {
    const lost = new KeptHeads(keys).last(ledger)!;
    const options = { url: database.url, signer, reason: "a disk failed" };
    const declared = await declareRestored({ ...options, keptHeads: new KeptHeads(keys) });
    expect(declared).toEqual([{ campaign: "dune", kept: lost, size: 6 }]);
    const store = await open();
    const { entry, payload } = await readEntry(store, { campaign: "dune", seq: 6 });
    expect(entry.kind).toBe("ledger.restored");
    expect(JSON.parse(payload)).toEqual({
      after: 6,
      before: 8,
      reason: "a disk failed",
      root: Buffer.from(lost.root).toString("base64"),
    });
    await append(store, "after-the-restore");
    expect(heads(ledger)).toEqual(["0000000000000008.note"]);
    expect(readdirSync(path.join(keys, "heads")).sort()).toEqual([ledger, `${ledger}.given-up-8`]);
    await store.close();
    expect(await declareRestored({ ...options, keptHeads: new KeptHeads(keys) })).toEqual([]);
    await (await open()).close();
  });

  it("is found by a process that runs on before it adds anything", async () => {
    const running = await open();
    await append(running, "one-more");
    await copyDatabase(`${name()}_backup`, name());
    // The connections that the copy cut off are opened anew by the next query.
    await running.sql`select 1`.catch(() => {});
    await expect(append(running, "on-the-backup")).rejects.toMatchObject({ code: "restored" });
    await running.close();
  });

  it("is refused as well where others were appended since, so that it is as large again", async () => {
    const careless = await openStore({ url: database.url, signer });
    for (const key of ["b1", "b2", "b3"]) await append(careless, key);
    await careless.close();
    await expect(open()).rejects.toMatchObject({
      code: "restored",
      message: expect.stringContaining("other ones among the first 9") as string,
    });
  });

  it("that lacks a ledger wholly is declared by putting its head aside", async () => {
    const other = await createTestDatabase();
    const options = { url: other.url, signer, reason: "begun anew" };
    await expect(
      openStore({ url: other.url, signer, keptHeads: new KeptHeads(keys) }),
    ).rejects.toMatchObject({ code: "restored" });
    const declared = await declareRestored({ ...options, keptHeads: new KeptHeads(keys) });
    expect(declared.map(({ campaign }) => campaign)).toEqual([null]);
    await (await openStore({ ...options, keptHeads: new KeptHeads(keys) })).close();
    await other.drop();
  });
});

describe("the heads kept outside the database", () => {
  it("are the largest, whichever of several processes wrote last", async () => {
    const folder = mkdtempSync(path.join(keys, "several-"));
    const store = await openStore({ url: database.url, signer });
    const { ledger } = await openCampaign(store, { coordinator: null, campaign: opening("ridge") });
    const first = (await readLatestHead(store, "ridge")).note;
    await appendEntries(store, { campaign: "ridge", by: system, entries: [team("one")] });
    const second = (await readLatestHead(store, "ridge")).note;
    const [slow, fast] = [new KeptHeads(folder), new KeptHeads(folder)];
    await fast.keep(second);
    await slow.keep(first);
    expect(new KeptHeads(folder).last(ledger)).toEqual(parseTreeHead(second));
    await store.close();
  });

  it("are refused where a file holds none", () => {
    const folder = mkdtempSync(path.join(keys, "spoilt-"));
    expect(new KeptHeads(folder).all()).toEqual([]);
    mkdtempSync(path.join(folder, "heads", "l-"));
    const [name] = readdirSync(path.join(folder, "heads"));
    writeFileSync(path.join(folder, "heads", name!, "0000000000000003.note"), "nothing");
    expect(() => new KeptHeads(folder)).toThrow("found no signed head in");
  });
});
