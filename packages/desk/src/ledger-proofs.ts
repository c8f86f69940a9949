import {
  consistencyNodes,
  consistencyProof,
  inclusionNodes,
  inclusionProof,
} from "@weighhouse/ledger/proof";
import type { NodeAddress, ReadNode } from "@weighhouse/ledger/proof";
import { hex } from "@weighhouse/ledger/bytes";
import { nodeHasher } from "@weighhouse/ledger/node-hasher";
import { nodeReader } from "@weighhouse/store/read-ledger";
import type { Desk } from "./desk";

/** Inclusion proof of an entry in the tree of a size, hexadecimal, from the leaf up. */
export async function proveInclusion(
  desk: Desk,
  key: string,
  at: { index: number; size: number },
): Promise<string[]> {
  const readNode = await nodesOf(desk, key, inclusionNodes(at));
  return inclusionProof(nodeHasher, at, readNode).map(hex);
}

/** Consistency proof between the trees of two sizes, hexadecimal. */
export async function proveConsistency(
  desk: Desk,
  key: string,
  between: { from: number; to: number },
): Promise<string[]> {
  const readNode = await nodesOf(desk, key, consistencyNodes(between));
  return consistencyProof(nodeHasher, between, readNode).map(hex);
}

/** Fetches the nodes that a proof needs, all at once, and gives them to it by address. */
async function nodesOf(desk: Desk, key: string, addresses: NodeAddress[]): Promise<ReadNode> {
  const read = await nodeReader(desk.store, key);
  const hashes = await Promise.all(addresses.map(({ level, index }) => read(level, index)));
  const nodes = new Map(addresses.map((address, i) => [nameOf(address), hashes[i]!]));
  return (address) => nodes.get(nameOf(address))!;
}

const nameOf = ({ level, index }: NodeAddress) => `${level}/${index}`;
