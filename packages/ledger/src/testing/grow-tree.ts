import { nodeHasher } from "../node-hasher";
import type { ReadNode } from "../proof";
import { appendLeaf, emptyEdge } from "../tree";
import type { Edge } from "../tree";

/** A tree grown leaf by leaf, with its edge at every size and its nodes kept as a database would. */
export function growTree(leaves: Uint8Array[]): {
  leaves: Uint8Array[];
  edges: Edge[];
  readNode: ReadNode;
} {
  const stored = new Map<string, Uint8Array>();
  const edges = [emptyEdge()];
  for (const leaf of leaves) {
    const appended = appendLeaf(nodeHasher, edges.at(-1) as Edge, leaf);
    edges.push(appended.edge);
    for (const { level, index, hash } of appended.nodes) stored.set(`${level}/${index}`, hash);
  }
  return {
    leaves,
    edges,
    readNode: ({ level, index }) => {
      const hash = stored.get(`${level}/${index}`);
      if (hash === undefined) throw new Error(`no node ${level}/${index}`);
      return hash;
    },
  };
}
