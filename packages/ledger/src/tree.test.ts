import { hexToBytes } from "@noble/hashes/utils.js";
import { expect, it } from "vitest";
import { hex, utf8 } from "./bytes";
import sha256 from "./fixtures/fips180-4.json";
import vectors from "./fixtures/rfc6962.json";
import { hashLeaf, hashNode } from "./hasher";
import { nobleHasher } from "./noble-hasher";
import { nodeHasher } from "./node-hasher";
import { growTree } from "./testing/grow-tree";
import { appendLeaf, emptyEdge, rootOf } from "./tree";

const leaves = vectors.leavesHex.map((leaf) => hashLeaf(nodeHasher, hexToBytes(leaf)));

it.each([
  ["node:crypto", nodeHasher],
  ["@noble", nobleHasher],
])("SHA-256 of %s gives FIPS 180-4's digests, whole and in parts", (_, hasher) => {
  for (const { text, repeat, sha256: digest } of sha256.rows) {
    const bytes = utf8(text.repeat(repeat));
    expect(hex(hasher(bytes))).toBe(digest);
    const middle = bytes.length >> 1;
    expect(hex(hasher(bytes.slice(0, middle), bytes.slice(middle)))).toBe(digest);
  }
});

it("the roots of 0 to 8 leaves are RFC 6962's published ones", () => {
  const { edges } = growTree(leaves);
  expect(edges.map((edge) => hex(rootOf(nodeHasher, edge)))).toEqual([
    vectors.emptyRoot,
    ...vectors.roots,
  ]);
});

it("the root by appends is the root by RFC 6962's recursive definition, for every size", () => {
  const many = Array.from({ length: 260 }, (_, i) => hashLeaf(nodeHasher, utf8(`leaf ${i}`)));
  const { edges } = growTree(many);
  for (const edge of edges) {
    expect(hex(rootOf(nodeHasher, edge))).toBe(hex(definition(many.slice(0, edge.size))));
  }
});

it("an append leaves the edge before it as it was", () => {
  const before = appendLeaf(nodeHasher, emptyEdge(), leaves[0] as Uint8Array).edge;
  const root = hex(rootOf(nodeHasher, before));
  appendLeaf(nodeHasher, before, leaves[1] as Uint8Array);
  expect(before.size).toBe(1);
  expect(hex(rootOf(nodeHasher, before))).toBe(root);
});

it("each append names exactly the perfect subtrees that it completes", () => {
  let edge = emptyEdge();
  const completed: string[] = [];
  for (const leaf of leaves) {
    const appended = appendLeaf(nodeHasher, edge, leaf);
    edge = appended.edge;
    completed.push(appended.nodes.map(({ level, index }) => `${level}/${index}`).join(" "));
  }
  expect(completed).toEqual([
    "0/0",
    "0/1 1/0",
    "0/2",
    "0/3 1/1 2/0",
    "0/4",
    "0/5 1/2",
    "0/6",
    "0/7 1/3 2/1 3/0",
  ]);
});

/** MTH of RFC 6962 section 2.1, word for word; the leaves are hashed already. */
function definition(hashes: Uint8Array[]): Uint8Array {
  if (hashes.length === 0) return nodeHasher();
  if (hashes.length === 1) return hashes[0] as Uint8Array;
  let split = 1;
  while (split * 2 < hashes.length) split *= 2;
  return hashNode(nodeHasher, definition(hashes.slice(0, split)), definition(hashes.slice(split)));
}
