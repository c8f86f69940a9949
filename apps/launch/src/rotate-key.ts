import { fingerprint } from "@weighhouse/ledger/verifier-key";
import { rotateKey } from "@weighhouse/store/keys";
import { connect } from "@weighhouse/store/open-store";
import type { Settings } from "@weighhouse/store/settings";
import { enrolKey } from "@weighhouse/store/signing-keys";
import { say } from "./say";
import { withDatabase } from "./with-database";

/** Makes a new signing key, lists it in the database and puts it in the old one's place. */
export async function rotateKeyOf(settings: Settings): Promise<number> {
  return withDatabase(settings, async ({ url, keys }) => {
    const sql = connect(url, 1);
    try {
      const next = await rotateKey(keys, (listed, key) => enrolKey(sql, { listed, next: key }));
      say(`new signing key ${fingerprint(next.publicKey)} in ${keys}; the old one lies beside it`);
      say("restart web and scorers to sign with it; on other machines, copy the folder first");
    } finally {
      await sql.end();
    }
    return 0;
  });
}
