import { base64 } from "@weighhouse/ledger/bytes";
import { nodeHasher } from "@weighhouse/ledger/node-hasher";
import { rootOf } from "@weighhouse/ledger/tree";
import { nodeReader } from "./read-ledger";
import type { Store } from "./open-store";

/** Root of the tree of any size, base64, from stored nodes: also between two signed heads. */
export async function rootAt(store: Store, campaign: string, size: number): Promise<string> {
  const read = await nodeReader(store, campaign);
  const hashes = await Promise.all(edgeOf(size).map(({ level, index }) => read(level, index)));
  return base64(rootOf(nodeHasher, { size, hashes }));
}

/** The perfect subtrees of the tree's right edge, largest first: one per 1 bit of its size. */
function edgeOf(size: number): { level: number; index: number }[] {
  const edge: { level: number; index: number }[] = [];
  let begin = 0;
  for (let level = 30; level >= 0; level -= 1) {
    const width = 2 ** level;
    if (size - begin >= width) {
      edge.push({ level, index: begin / width });
      begin += width;
    }
  }
  return edge;
}
