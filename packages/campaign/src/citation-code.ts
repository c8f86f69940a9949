import { canonicalBytes } from "@weighhouse/ledger/canonical";
import { nobleHasher } from "@weighhouse/ledger/noble-hasher";

const ALPHABET = "0123456789abcdefghjkmnpqrstvwxyz";
const LENGTH = 8;

/**
 * The short code that cited standings are found by: the first 40 bits of the SHA-256 of their
 * canonical text, five bits a character. Who has the code can check what it is of.
 */
export function citationCode(standings: unknown): string {
  const digest = nobleHasher(canonicalBytes(standings));
  let bits = 0n;
  for (const byte of digest.subarray(0, (LENGTH * 5) / 8)) bits = (bits << 8n) | BigInt(byte);
  const characters = Array.from({ length: LENGTH }, (_, place) => {
    return ALPHABET[Number((bits >> BigInt(5 * (LENGTH - 1 - place))) & 31n)];
  });
  return characters.join("");
}
