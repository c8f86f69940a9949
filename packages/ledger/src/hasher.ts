/**
 * SHA-256 over the parts one after another. Synchronous: WebCrypto is asynchronous, slow for small
 * inputs and missing on plain-HTTP addresses, so servers pass `nodeHasher`, browsers `nobleHasher`.
 */
export type Hasher = (...parts: Uint8Array[]) => Uint8Array;

/** Length of a hash in bytes. */
export const HASH_BYTES = 32;

/** RFC 6962 section 2.1: leaves and nodes are hashed apart, so that a node can't pass for a leaf. */
const LEAF_PREFIX = Uint8Array.of(0x00);
const NODE_PREFIX = Uint8Array.of(0x01);

/** SHA-256(0x00 || data), RFC 6962 section 2.1. */
export function hashLeaf(hasher: Hasher, data: Uint8Array): Uint8Array {
  return hasher(LEAF_PREFIX, data);
}

/** SHA-256(0x01 || left || right), RFC 6962 section 2.1. */
export function hashNode(hasher: Hasher, left: Uint8Array, right: Uint8Array): Uint8Array {
  return hasher(NODE_PREFIX, left, right);
}
