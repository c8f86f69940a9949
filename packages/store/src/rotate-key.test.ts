import { chmodSync, mkdtempSync, readdirSync, rmSync, statSync } from "node:fs";
import { tmpdir } from "node:os";
import path from "node:path";
import { afterAll, beforeAll, expect, it } from "vitest";
import { createPrivateKeyPem, signerFromPem } from "@weighhouse/ledger/node-keys";
import { verifyTreeHead } from "@weighhouse/ledger/tree-head";
import { decodeVerifierKey, fingerprint } from "@weighhouse/ledger/verifier-key";
import { appendEntries } from "./append";
import { openKeys, rotateKey } from "./keys";
import { openCampaign } from "./open-campaign";
import { openStore } from "./open-store";
import { readHeads, readSigningKeys } from "./read-ledger";
import { enrolKey } from "./signing-keys";
import { opening, system } from "./testing/sample-campaign";
import { createTestDatabase } from "./testing/test-database";
import type { TestDatabase } from "./testing/test-database";

const folder = path.join(mkdtempSync(path.join(tmpdir(), "weighhouse-rotate-")), "keys");
let database: TestDatabase;
beforeAll(async () => {
  database = await createTestDatabase();
});
afterAll(async () => {
  await database.drop();
  rmSync(path.dirname(folder), { recursive: true, force: true });
});

it("a key that is rotated in signs from then on, and heads of the old one stay good", async () => {
  const old = await openKeys({ folder, name: "house.example", make: true });
  const store = await openStore({ url: database.url, signer: old });
  await openCampaign(store, { coordinator: null, campaign: opening("dune") });
  await rotateKey(folder, (listed, next) => enrolKey(store.sql, { listed, next }));
  const next = await openKeys({ folder, name: "house.example", make: false });
  expect(next.name).toBe(old.name);
  expect(next.publicKey).not.toEqual(old.publicKey);
  const retired = `tree-heads-${fingerprint(old.publicKey).slice(0, 16)}`;
  expect(readdirSync(folder).sort()).toEqual(
    ["tree-heads.pem", "tree-heads.vkey", `${retired}.pem`, `${retired}.vkey`].sort(),
  );
  for (const file of readdirSync(folder)) {
    expect(statSync(path.join(folder, file)).mode & 0o777, file).toBe(0o600);
  }

  const restarted = await openStore({ url: database.url, signer: next });
  const team = { kind: "team.joined" as const, payload: { key: "grain" } };
  await appendEntries(restarted, { campaign: "dune", by: system, entries: [team] });
  const keys = (await readSigningKeys(restarted)).map(decodeVerifierKey);
  expect(keys.map(({ publicKey }) => fingerprint(publicKey))).toEqual(
    [old, next].map(({ publicKey }) => fingerprint(publicKey)),
  );
  const signedBy = (await readHeads(restarted, { campaign: "dune" })).map(({ note }) => {
    const verified = verifyTreeHead(note, keys);
    return verified.ok ? verified.signedBy.map(({ publicKey }) => fingerprint(publicKey)) : [];
  });
  expect(signedBy).toEqual([[fingerprint(old.publicKey)], [fingerprint(next.publicKey)]]);
  // A process that still holds the old key goes on.
  const other = { kind: "team.joined" as const, payload: { key: "wind" } };
  await appendEntries(store, { campaign: "dune", by: system, entries: [other] });
  await (await openStore({ url: database.url, signer: old })).close();
  await Promise.all([store.close(), restarted.close()]);
});

it("a key is vouched for by one that the database lists, and the folder stays as it was else", async () => {
  const strange = path.join(path.dirname(folder), "strange");
  const before = await openKeys({ folder: strange, name: "house.example", make: true });
  const store = await openStore({ url: database.url, signer: null });
  await expect(
    rotateKey(strange, (listed, next) => enrolKey(store.sql, { listed, next })),
  ).rejects.toMatchObject({ code: "strange-key" });
  const after = await openKeys({ folder: strange, name: "house.example", make: false });
  expect(after.publicKey).toEqual(before.publicKey);
  const next = signerFromPem(createPrivateKeyPem(), "house.example");
  await expect(openStore({ url: database.url, signer: next })).rejects.toMatchObject({
    code: "strange-key",
  });
  chmodSync(path.join(strange, "tree-heads.pem"), 0o604);
  await expect(rotateKey(strange, async () => {})).rejects.toMatchObject({ code: "bad-keys" });
  await store.close();
});
