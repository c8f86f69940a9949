import { randomBytes, randomUUID } from "node:crypto";
import { createPrivateKeyPem, signerFromPem } from "@weighhouse/ledger/node-keys";
import { openStore } from "@weighhouse/store/open-store";
import { sealKeyOf } from "@weighhouse/store/seal-key";
import { createTestDatabase } from "@weighhouse/store/testing/test-database";
import type { Actor, Desk } from "../desk";

export type TestDesk = {
  desk: Desk;
  /** The database as its owner: who has this reads everything. */
  adminUrl: string;
  /** Makes an account. */
  person(name: string): Promise<NonNullable<Actor> & { email: string }>;
  close(): Promise<void>;
};

/** A desk over a fresh database, with accounts made on the spot. */
export async function openTestDesk(): Promise<TestDesk> {
  const database = await createTestDatabase();
  const signer = signerFromPem(createPrivateKeyPem(), "house.example");
  const sealKey = sealKeyOf(randomBytes(32));
  const store = await openStore({ url: database.url, signer, sealKey, connections: 4 });
  return {
    desk: { store },
    adminUrl: database.adminUrl,
    async person(name) {
      const userId = randomUUID();
      const email = `${name.toLowerCase().replaceAll(" ", ".")}@people.example`;
      await store.sql`insert into "user" (id, name, email) values (${userId}, ${name}, ${email})`;
      return { userId, name, email };
    },
    async close() {
      await store.close();
      await database.drop();
    },
  };
}
