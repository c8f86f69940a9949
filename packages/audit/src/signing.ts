import { fingerprint } from "@weighhouse/ledger/verifier-key";
import type { VerifierKey } from "@weighhouse/ledger/verifier-key";
import * as layout from "./layout";
import type { ReadmeFacts } from "./read-me";

export type Signing = Pick<
  ReadmeFacts,
  "fingerprint" | "keyPath" | "lastHeadPath" | "headKeyPath" | "stamped"
>;

type SigningKey = Pick<VerifierKey, "publicKey">;

/**
 * Who signed what, as the README says it: the keys may have been changed since the last head.
 *
 * @param ledger its size, and how many of its heads are time-stamped
 */
export function signingOf(
  manifestKey: SigningKey,
  headKey: SigningKey,
  { size, stamped }: { size: number; stamped: number },
): Signing {
  const signedBy = fingerprint(manifestKey.publicKey);
  return {
    fingerprint: signedBy,
    keyPath: layout.keyPath(signedBy),
    lastHeadPath: layout.headPath(size),
    headKeyPath: layout.keyPath(fingerprint(headKey.publicKey)),
    stamped,
  };
}
