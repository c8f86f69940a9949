import { fingerprint } from "@weighhouse/ledger/verifier-key";
import type { VerifierKey } from "@weighhouse/ledger/verifier-key";
import * as layout from "./layout";
import type { ReadmeFacts } from "./read-me";

export type Signing = Pick<ReadmeFacts, "fingerprint" | "keyPath" | "lastHeadPath" | "headKeyPath">;

/** Who signed what, as the README says it: the keys may have been changed since the last head. */
export function signingOf(
  manifestKey: Pick<VerifierKey, "publicKey">,
  size: number,
  headKey: Pick<VerifierKey, "publicKey">,
): Signing {
  const signedBy = fingerprint(manifestKey.publicKey);
  return {
    fingerprint: signedBy,
    keyPath: layout.keyPath(signedBy),
    lastHeadPath: layout.headPath(size),
    headKeyPath: layout.keyPath(fingerprint(headKey.publicKey)),
  };
}
