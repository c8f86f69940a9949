import { canonicalBytes } from "./canonical";
import { hex } from "./bytes";
import type { Hasher } from "./hasher";

/** What a seal binds: who seals what, so that a rival can't copy a digest and later its opening. */
export type Sealed = {
  /** The ledger's id, of its entry 0. */
  ledger: string;
  team: string | null;
  /** Null for a measurement. */
  hypothesis: string | null;
  measurand: string;
  /** 32 random bytes, lower-case hexadecimal: without them a guess at the content could be tried. */
  nonce: string;
  /** The prediction or the measurement, as JSON; every property counts. */
  content: unknown;
};

/**
 * The digest that a seal puts on record.
 *
 *   SHA-256(JCS({ ledger, team, hypothesis, measurand, nonce, content })), lower-case hexadecimal
 *
 * @throws {LedgerError} `not-json` where the content is no JSON value
 */
export function sealDigest(hasher: Hasher, sealed: Sealed): string {
  const { ledger, team, hypothesis, measurand, nonce, content } = sealed;
  return hex(hasher(canonicalBytes({ ledger, team, hypothesis, measurand, nonce, content })));
}
