import { createHash } from "node:crypto";
import type { Hasher } from "./hasher";

/** SHA-256 of node:crypto: about twice as fast as `nobleHasher` on entries. */
export const nodeHasher: Hasher = (...parts) => {
  const hash = createHash("sha256");
  for (const part of parts) hash.update(part);
  return new Uint8Array(hash.digest());
};
