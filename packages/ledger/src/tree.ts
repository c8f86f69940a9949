import { hashNode } from "./hasher";
import type { Hasher } from "./hasher";

/**
 * The right edge of a Merkle tree: the roots of its perfect subtrees, largest first. That is all an
 * append needs, so it hashes O(log n) and reads no old entry.
 */
export type Edge = { size: number; hashes: Uint8Array[] };

/**
 * A perfect subtree: the leaves [index * 2^level, (index + 1) * 2^level). A node never changes once
 * its leaves are there, so nodes are stored once and proofs read O(log n) of them.
 */
export type TreeNode = { level: number; index: number; hash: Uint8Array };

export function emptyEdge(): Edge {
  return { size: 0, hashes: [] };
}

/**
 * Appends one leaf hash.
 *
 * @returns the new edge, and the nodes that this leaf completes, the leaf itself (level 0) first
 */
export function appendLeaf(
  hasher: Hasher,
  edge: Edge,
  leaf: Uint8Array,
): { edge: Edge; nodes: TreeNode[] } {
  const hashes = [...edge.hashes];
  const nodes: TreeNode[] = [{ level: 0, index: edge.size, hash: leaf }];
  let hash = leaf;
  let index = edge.size;
  // Each trailing 1 bit of the old size is a perfect subtree that the new leaf completes into a
  // larger one. Division, not bit operations: those stop at 2^32.
  for (let level = 1; index % 2 === 1; level += 1) {
    hash = hashNode(hasher, hashes.pop() as Uint8Array, hash);
    index = (index - 1) / 2;
    nodes.push({ level, index, hash });
  }
  hashes.push(hash);
  return { edge: { size: edge.size + 1, hashes }, nodes };
}

/** Merkle tree hash of all leaves (RFC 6962 section 2.1); SHA-256 of nothing for the empty tree. */
export function rootOf(hasher: Hasher, edge: Edge): Uint8Array {
  return foldRight(hasher, edge.hashes);
}

/** Joins the roots of neighbouring subtrees, largest first, into the root above them. */
export function foldRight(hasher: Hasher, hashes: Uint8Array[]): Uint8Array {
  if (hashes.length === 0) return hasher();
  return hashes.reduceRight((right, left) => hashNode(hasher, left, right));
}
