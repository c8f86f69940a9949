import { sha256 } from "@noble/hashes/sha2.js";
import type { Hasher } from "./hasher";

/** SHA-256 in plain JavaScript, for browsers. */
export const nobleHasher: Hasher = (...parts) => {
  const hash = sha256.create();
  for (const part of parts) hash.update(part);
  return hash.digest();
};
