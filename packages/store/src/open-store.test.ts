import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { createPrivateKeyPem, signerFromPem } from "@weighhouse/ledger/node-keys";
import { openStore } from "./open-store";
import { createTestDatabase } from "./testing/test-database";
import type { TestDatabase } from "./testing/test-database";

describe("opening the store", () => {
  let database: TestDatabase;
  beforeAll(async () => {
    database = await createTestDatabase();
  });
  afterAll(() => database.drop());

  it("refuses a running role that owns the entries", async () => {
    await expect(openStore({ url: database.adminUrl, signer: null })).rejects.toMatchObject({
      code: "owner-runs",
    });
  });

  it("refuses a database that isn't migrated", async () => {
    const other = new URL(database.url);
    other.pathname = "/postgres";
    await expect(openStore({ url: other.href, signer: null })).rejects.toMatchObject({
      code: "not-migrated",
    });
  });

  it("enrols the first key ever and refuses a strange one after it", async () => {
    const first = signerFromPem(createPrivateKeyPem(), "house.example");
    const strange = signerFromPem(createPrivateKeyPem(), "house.example");
    await (await openStore({ url: database.url, signer: first })).close();
    await (await openStore({ url: database.url, signer: first })).close();
    await expect(openStore({ url: database.url, signer: strange })).rejects.toMatchObject({
      code: "strange-key",
    });
  });
});
