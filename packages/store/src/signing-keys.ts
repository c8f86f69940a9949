import type { TreeHeadSigner } from "@weighhouse/ledger/tree-head";
import { encodeVerifierKey, fingerprint } from "@weighhouse/ledger/verifier-key";
import type { Sql } from "postgres";
import { StoreError } from "./store-error";

/**
 * Refuses a signing key that the database doesn't list: a process with another key would sign heads
 * that nobody can check. The first key ever is enrolled; a listed one under a new name is added.
 */
export async function requireListedKey(sql: Sql, signer: TreeHeadSigner): Promise<void> {
  const print = fingerprint(signer.publicKey);
  await sql.begin(async (tx) => {
    // Two first starts at once: one of them enrols.
    await tx`select pg_advisory_xact_lock(hashtext('signing_keys'))`;
    const listed = await tx<{ fingerprint: string }[]>`select fingerprint from signing_keys`;
    if (listed.length > 0 && !listed.some((key) => key.fingerprint === print)) {
      const known = listed.map((key) => key.fingerprint).join(", ");
      throw new StoreError(
        "strange-key",
        `WEIGHHOUSE_KEYS: found the key with fingerprint ${print}; allowed are those that the database lists: ${known}`,
      );
    }
    await tx`
      insert into signing_keys (verifier_key, fingerprint)
      values (${encodeVerifierKey(signer)}, ${print}) on conflict do nothing`;
  });
}

/** Lists a further key, which who holds a listed one vouches for. */
export async function enrolKey(
  sql: Sql,
  { listed, next }: { listed: TreeHeadSigner; next: TreeHeadSigner },
): Promise<void> {
  await requireListedKey(sql, listed);
  await sql`
    insert into signing_keys (verifier_key, fingerprint)
    values (${encodeVerifierKey(next)}, ${fingerprint(next.publicKey)})`;
}
