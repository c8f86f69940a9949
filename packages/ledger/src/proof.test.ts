import { readdirSync, readFileSync } from "node:fs";
import { hexToBytes } from "@noble/hashes/utils.js";
import * as fc from "fast-check";
import { describe, expect, it } from "vitest";
import { hex, utf8 } from "./bytes";
import vectors from "./fixtures/rfc6962.json";
import { hashLeaf } from "./hasher";
import { nodeHasher } from "./node-hasher";
import {
  consistencyNodes,
  consistencyProof,
  inclusionNodes,
  inclusionProof,
  verifyConsistency,
  verifyInclusion,
} from "./proof";
import { growTree } from "./testing/grow-tree";
import { rootOf } from "./tree";

const published = growTree(vectors.leavesHex.map((leaf) => hashLeaf(nodeHasher, hexToBytes(leaf))));

describe("against RFC 6962's published vectors", () => {
  it.each(vectors.inclusion)("leaf $index of $size has the published audit path", (vector) => {
    const proof = inclusionProof(nodeHasher, vector, published.readNode);
    expect(proof.map(hex)).toEqual(vector.path);
    const outcome = verifyInclusion(nodeHasher, {
      index: vector.index,
      size: vector.size,
      leafHash: published.leaves[vector.index] as Uint8Array,
      proof,
      root: hexToBytes(vectors.roots[vector.size - 1] as string),
    });
    expect(outcome).toEqual({ ok: true });
  });

  it.each(vectors.consistency)("size $from to $to has the published proof", (vector) => {
    const proof = consistencyProof(nodeHasher, vector, published.readNode);
    expect(proof.map(hex)).toEqual(vector.proof);
    const outcome = verifyConsistency(nodeHasher, {
      from: vector.from,
      to: vector.to,
      oldRoot: hexToBytes(vectors.roots[vector.from - 1] as string),
      newRoot: hexToBytes(vectors.roots[vector.to - 1] as string),
      proof,
    });
    expect(outcome).toEqual({ ok: true });
  });
});

describe("a lie is refused for what it is", () => {
  const folder = new URL("fixtures/lies/", import.meta.url);
  const lies = readdirSync(folder).map((name) => ({
    name: name.replace(".json", ""),
    ...JSON.parse(readFileSync(new URL(name, folder), "utf8")),
  }));

  it.each(lies.filter(({ name }) => name.startsWith("inclusion")))("$name", ({ claim, reason }) => {
    const outcome = verifyInclusion(nodeHasher, {
      index: claim.index,
      size: claim.size,
      leafHash: hexToBytes(claim.leafHash),
      proof: claim.proof.map(hexToBytes),
      root: hexToBytes(claim.root),
    });
    expect(outcome).toEqual({ ok: false, reason });
  });

  it.each(lies.filter(({ name }) => name.startsWith("consistency")))(
    "$name",
    ({ claim, reason }) => {
      const outcome = verifyConsistency(nodeHasher, {
        from: claim.from,
        to: claim.to,
        oldRoot: hexToBytes(claim.oldRoot),
        newRoot: hexToBytes(claim.newRoot),
        proof: claim.proof.map(hexToBytes),
      });
      expect(outcome).toEqual({ ok: false, reason });
    },
  );
});

describe("for every size", () => {
  const size = 260;
  const tree = growTree(Array.from({ length: size }, (_, i) => hashLeaf(nodeHasher, utf8(`${i}`))));
  const roots = tree.edges.map((edge) => rootOf(nodeHasher, edge));
  const rootAt = (n: number) => roots[n] as Uint8Array;
  const leaf = (i: number) => tree.leaves[i] as Uint8Array;

  it("every leaf's inclusion proof holds, for its leaf and place only", () => {
    const wrong: string[] = [];
    for (let n = 1; n <= size; n += 1) {
      const root = rootAt(n);
      for (let index = 0; index < n; index += 1) {
        const proof = inclusionProof(nodeHasher, { index, size: n }, tree.readNode);
        const claim = { index, size: n, leafHash: leaf(index), proof, root };
        if (!verifyInclusion(nodeHasher, claim).ok) wrong.push(`${index} of ${n}`);
        const another = (index + 1) % n;
        if (n === 1) continue;
        for (const lie of [{ index: another }, { leafHash: leaf(another) }]) {
          if (verifyInclusion(nodeHasher, { ...claim, ...lie }).ok) wrong.push(`${index} of ${n}!`);
        }
      }
    }
    expect(wrong).toEqual([]);
  });

  it("every earlier size's consistency proof holds, for its two roots only", () => {
    const wrong: string[] = [];
    for (let to = 1; to <= size; to += 1) {
      const newRoot = rootAt(to);
      for (let from = 0; from <= to; from += 1) {
        const proof = consistencyProof(nodeHasher, { from, to }, tree.readNode);
        const claim = { from, to, oldRoot: rootAt(from), newRoot, proof };
        if (!verifyConsistency(nodeHasher, claim).ok) wrong.push(`${from} to ${to}`);
        const oldRoot = rootAt(from < 2 ? from + 1 : from - 1);
        if (verifyConsistency(nodeHasher, { ...claim, oldRoot }).ok)
          wrong.push(`${from} to ${to}!`);
      }
    }
    expect(wrong).toEqual([]);
  });

  it("a proof with any one bit changed, a hash lost or a hash added fails", () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 2, max: size }),
        fc.nat(),
        fc.nat(),
        fc.nat({ max: 255 }),
        fc.constantFrom("flip", "drop", "add"),
        (n, place, where, bit, how) => {
          const index = place % n;
          const from = 1 + (place % (n - 1));
          const inclusion = inclusionProof(nodeHasher, { index, size: n }, tree.readNode);
          const consistency = consistencyProof(nodeHasher, { from, to: n }, tree.readNode);
          const spoilt = (proof: Uint8Array[]) => spoil(proof, { where, bit, how });
          const claim = { index, size: n, leafHash: leaf(index), root: rootAt(n) };
          expect(verifyInclusion(nodeHasher, { ...claim, proof: spoilt(inclusion) }).ok).toBe(
            false,
          );
          const heads = { from, to: n, oldRoot: rootAt(from), newRoot: rootAt(n) };
          expect(verifyConsistency(nodeHasher, { ...heads, proof: spoilt(consistency) }).ok).toBe(
            false,
          );
        },
      ),
      { numRuns: 2000 },
    );
  });

  it("the nodes to read are named beforehand and were all stored by the appends so far", () => {
    for (const n of [1, 2, 3, 100, 255, 256, 257, size]) {
      for (const node of [
        ...inclusionNodes({ index: n - 1, size: n }),
        ...consistencyNodes({ from: n - 1, to: n }),
      ]) {
        expect((node.index + 1) * 2 ** node.level).toBeLessThanOrEqual(n);
        expect(tree.readNode(node)).toHaveLength(32);
      }
    }
  });
});

it("sizes past 32 bits are addressed without overflow", () => {
  // Python's integers, by the definition of PATH: the siblings of leaf 2^40 among 2^40 + 3 leaves.
  expect(inclusionNodes({ index: 2 ** 40, size: 2 ** 40 + 3 })).toEqual([
    { level: 0, index: 2 ** 40 + 1 },
    { level: 0, index: 2 ** 40 + 2 },
    { level: 40, index: 0 },
  ]);
  const widest = inclusionNodes({ index: 2 ** 52, size: 2 ** 53 - 1 });
  expect(widest.at(-1)).toEqual({ level: 52, index: 0 });
  expect(widest.every(({ level, index }) => (index + 1) * 2 ** level < 2 ** 53)).toBe(true);
});

it("a leaf or a size outside the tree has no proof", () => {
  expect(() => inclusionNodes({ index: 3, size: 3 })).toThrow("found leaf 3");
  expect(() => consistencyNodes({ from: 4, to: 3 })).toThrow("found size 4");
});

function spoil(
  proof: Uint8Array[],
  { where, bit, how }: { where: number; bit: number; how: string },
): Uint8Array[] {
  if (how === "add") return [...proof, new Uint8Array(32)];
  if (how === "drop") return proof.filter((_, index) => index !== where % proof.length);
  return proof.map((hash, index) => {
    if (index !== where % proof.length) return hash;
    return hash.map((byte, at) => (at === bit >> 3 ? byte ^ (1 << (bit & 7)) : byte));
  });
}
