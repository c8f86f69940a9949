import { sameBytes } from "./bytes";
import { HASH_BYTES, hashNode } from "./hasher";
import type { Hasher } from "./hasher";
import { LedgerError } from "./ledger-error";
import { foldRight } from "./tree";
import type { TreeNode } from "./tree";

export type NodeAddress = Pick<TreeNode, "level" | "index">;
/** Gives the hash of a stored node. */
export type ReadNode = (address: NodeAddress) => Uint8Array;

export type ProofFault =
  | "index-outside-tree"
  | "sizes-out-of-order"
  | "not-a-hash"
  | "proof-too-short"
  | "proof-too-long"
  | "root-differs"
  | "old-root-differs"
  | "new-root-differs";
export type ProofOutcome = { ok: true } | { ok: false; reason: ProofFault };

/** Leaves [begin, end). */
type Range = { begin: number; end: number };

/** Addresses of the stored nodes from which `inclusionProof` is made, to be read in one go. */
export function inclusionNodes(at: { index: number; size: number }): NodeAddress[] {
  return inclusionRanges(at).flatMap(perfectNodes);
}

/** Addresses of the stored nodes from which `consistencyProof` is made. */
export function consistencyNodes(between: { from: number; to: number }): NodeAddress[] {
  return consistencyRanges(between).flatMap(perfectNodes);
}

/**
 * The audit path of a leaf, PATH(index, D[size]) of RFC 6962 section 2.1.1, leaf's sibling first.
 *
 * @throws {LedgerError} `not-in-tree` unless 0 <= index < size
 */
export function inclusionProof(
  hasher: Hasher,
  at: { index: number; size: number },
  readNode: ReadNode,
): Uint8Array[] {
  return inclusionRanges(at).map((range) => hashOfRange(hasher, range, readNode));
}

/**
 * PROOF(from, D[to]) of RFC 6962 section 2.1.2. Empty for equal sizes and from the empty tree, which
 * everything extends.
 *
 * @throws {LedgerError} `not-in-tree` unless 0 <= from <= to
 */
export function consistencyProof(
  hasher: Hasher,
  between: { from: number; to: number },
  readNode: ReadNode,
): Uint8Array[] {
  return consistencyRanges(between).map((range) => hashOfRange(hasher, range, readNode));
}

/** RFC 9162 section 2.1.3.2. */
export function verifyInclusion(
  hasher: Hasher,
  claim: {
    index: number;
    size: number;
    leafHash: Uint8Array;
    proof: Uint8Array[];
    root: Uint8Array;
  },
): ProofOutcome {
  const { index, size, leafHash, proof, root } = claim;
  if (!isSize(index) || !isSize(size) || index >= size) return fault("index-outside-tree");
  if (![leafHash, root, ...proof].every(isHash)) return fault("not-a-hash");
  let node = index;
  let last = size - 1;
  let hash = leafHash;
  for (const sibling of proof) {
    if (last === 0) return fault("proof-too-long");
    if (isOdd(node) || node === last) {
      hash = hashNode(hasher, sibling, hash);
      // A last node without a sibling on its right rises until it is a right child.
      while (!isOdd(node) && node !== 0) [node, last] = [half(node), half(last)];
    } else {
      hash = hashNode(hasher, hash, sibling);
    }
    [node, last] = [half(node), half(last)];
  }
  if (last !== 0) return fault("proof-too-short");
  return sameBytes(hash, root) ? { ok: true } : fault("root-differs");
}

/** RFC 9162 section 2.1.4.2; from size 0 the old root must be the empty tree's. */
export function verifyConsistency(
  hasher: Hasher,
  claim: {
    from: number;
    to: number;
    oldRoot: Uint8Array;
    newRoot: Uint8Array;
    proof: Uint8Array[];
  },
): ProofOutcome {
  const { from, to, oldRoot, newRoot, proof } = claim;
  if (!isSize(from) || !isSize(to) || from > to) return fault("sizes-out-of-order");
  if (![oldRoot, newRoot, ...proof].every(isHash)) return fault("not-a-hash");
  if (from === 0 || from === to) {
    if (proof.length > 0) return fault("proof-too-long");
    if (from === 0 && !sameBytes(oldRoot, hasher())) return fault("old-root-differs");
    if (from === to && !sameBytes(oldRoot, newRoot)) return fault("new-root-differs");
    return { ok: true };
  }
  return walkConsistency(hasher, claim);
}

function walkConsistency(
  hasher: Hasher,
  claim: Parameters<typeof verifyConsistency>[1],
): ProofOutcome {
  // The old root itself is left out of the proof where it is a node of the new tree.
  const steps = isPowerOfTwo(claim.from) ? [claim.oldRoot, ...claim.proof] : claim.proof;
  const [first, ...rest] = steps;
  if (first === undefined) return fault("proof-too-short");
  let node = claim.from - 1;
  let last = claim.to - 1;
  while (isOdd(node)) [node, last] = [half(node), half(last)];
  let [oldHash, newHash] = [first, first];
  for (const step of rest) {
    if (last === 0) return fault("proof-too-long");
    if (isOdd(node) || node === last) {
      oldHash = hashNode(hasher, step, oldHash);
      newHash = hashNode(hasher, step, newHash);
      while (!isOdd(node) && node !== 0) [node, last] = [half(node), half(last)];
    } else {
      newHash = hashNode(hasher, newHash, step);
    }
    [node, last] = [half(node), half(last)];
  }
  if (last !== 0) return fault("proof-too-short");
  if (!sameBytes(oldHash, claim.oldRoot)) return fault("old-root-differs");
  return sameBytes(newHash, claim.newRoot) ? { ok: true } : fault("new-root-differs");
}

function inclusionRanges({ index, size }: { index: number; size: number }): Range[] {
  if (!isSize(index) || !isSize(size) || index >= size) {
    throw new LedgerError("not-in-tree", `found leaf ${index}; allowed are 0 to ${size - 1}`);
  }
  const ranges: Range[] = [];
  let [begin, end] = [0, size];
  while (end - begin > 1) {
    const middle = begin + largestPowerBelow(end - begin);
    if (index < middle) {
      ranges.push({ begin: middle, end });
      end = middle;
    } else {
      ranges.push({ begin, end: middle });
      begin = middle;
    }
  }
  return ranges.reverse();
}

function consistencyRanges({ from, to }: { from: number; to: number }): Range[] {
  if (!isSize(from) || !isSize(to) || from > to) {
    throw new LedgerError("not-in-tree", `found size ${from}; allowed are 0 to ${to}`);
  }
  if (from === 0 || from === to) return [];
  const ranges: Range[] = [];
  let [begin, end] = [0, to];
  while (from !== end) {
    const middle = begin + largestPowerBelow(end - begin);
    if (from <= middle) {
      ranges.push({ begin: middle, end });
      end = middle;
    } else {
      ranges.push({ begin, end: middle });
      begin = middle;
    }
  }
  // RFC 6962's flag b: a first subtree that is the whole old tree is known to the verifier.
  if (begin > 0) ranges.push({ begin, end });
  return ranges.reverse();
}

function hashOfRange(hasher: Hasher, range: Range, readNode: ReadNode): Uint8Array {
  return foldRight(hasher, perfectNodes(range).map(readNode));
}

/** The perfect subtrees that make up a range which a proof asks for, largest first. */
function perfectNodes({ begin, end }: Range): NodeAddress[] {
  const nodes: NodeAddress[] = [];
  for (let at = begin; at < end;) {
    let level = Math.round(Math.log2(end - at));
    // log2 rounds up just below large powers of two.
    if (2 ** level > end - at) level -= 1;
    nodes.push({ level, index: at / 2 ** level });
    at += 2 ** level;
  }
  return nodes;
}

/** The largest power of two smaller than n, for n >= 2: where RFC 6962 splits n leaves. */
function largestPowerBelow(n: number): number {
  let power = 1;
  while (power * 2 < n) power *= 2;
  return power;
}

function isPowerOfTwo(n: number): boolean {
  return n === 1 || largestPowerBelow(n) * 2 === n;
}

function isSize(n: number): boolean {
  return Number.isSafeInteger(n) && n >= 0;
}

function isHash(bytes: Uint8Array): boolean {
  return bytes.length === HASH_BYTES;
}

function isOdd(n: number): boolean {
  return n % 2 === 1;
}

function half(n: number): number {
  return Math.floor(n / 2);
}

function fault(reason: ProofFault): ProofOutcome {
  return { ok: false, reason };
}
