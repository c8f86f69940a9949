import { base64, sameBytes } from "@weighhouse/ledger/bytes";
import type { Hasher } from "@weighhouse/ledger/hasher";
import { LedgerError } from "@weighhouse/ledger/ledger-error";
import type { VerifySignature } from "@weighhouse/ledger/signed-note";
import { appendLeaf, emptyEdge, rootOf } from "@weighhouse/ledger/tree";
import type { Edge } from "@weighhouse/ledger/tree";
import { parseTreeHead, verifyTreeHead } from "@weighhouse/ledger/tree-head";
import type { TreeHead } from "@weighhouse/ledger/tree-head";
import { decodeVerifierKey, fingerprint } from "@weighhouse/ledger/verifier-key";
import type { VerifierKey } from "@weighhouse/ledger/verifier-key";
import { readText } from "./archive-text";
import type { Files } from "./container";
import { counted, failed, judged } from "./line";
import type { Checked, CheckLine } from "./line";
import { isKeyPath, keyPath, LEDGER, sizeOfHeadPath } from "../layout";

export type ArchiveHead = { path: string; note: string; head: TreeHead };

/** Keys of the archive; those whose file is no key, or another's, are named in `faults`. */
export function readKeys(files: Files): { keys: VerifierKey[]; faults: string[] } {
  const keys: VerifierKey[] = [];
  const faults: string[] = [];
  for (const path of [...files.keys()].filter(isKeyPath)) {
    try {
      const read = readText(files, path);
      if (!read.ok) throw new LedgerError("not-a-key", read.fault);
      const key = decodeVerifierKey(read.text);
      keys.push(key);
      if (keyPath(fingerprint(key.publicKey)) !== path) faults.push(`${path} holds another key`);
    } catch (error) {
      if (!(error instanceof LedgerError)) throw error;
      faults.push(`${path}: ${error.message}`);
    }
  }
  return { keys, faults };
}

/** The tree heads of the archive by size; those that can't be read are named in `faults`. */
export function readHeads(files: Files): { heads: ArchiveHead[]; faults: string[] } {
  const heads: ArchiveHead[] = [];
  const faults: string[] = [];
  const paths = [...files.keys()].filter((path) => sizeOfHeadPath(path) !== null).sort();
  for (const path of paths) {
    const read = readText(files, path);
    if (!read.ok) {
      faults.push(read.fault);
      continue;
    }
    try {
      const head = parseTreeHead(read.text);
      heads.push({ path, note: read.text, head });
      if (head.size !== sizeOfHeadPath(path)) faults.push(`${path} is of size ${head.size}`);
    } catch (error) {
      if (!(error instanceof LedgerError)) throw error;
      faults.push(`${path}: ${error.message}`);
    }
  }
  return { heads, faults };
}

/** The roots of the beginnings of a ledger. */
export type Roots = {
  /** Number of entries. */
  size: number;
  /** Root of the entries [0, size), or null for more than there are. */
  of: (size: number) => Uint8Array | null;
};

/** One pass over the leaves; a root is folded from its tree's right edge when it is asked for. */
export function rootsOf(leaves: readonly Uint8Array[], hasher: Hasher): Roots {
  const edges = [emptyEdge()];
  for (const leaf of leaves) edges.push(appendLeaf(hasher, edges.at(-1) as Edge, leaf).edge);
  return {
    size: leaves.length,
    of: (size) => {
      const edge = edges[size];
      return edge === undefined ? null : rootOf(hasher, edge);
    },
  };
}

/** The last head covers all entries, and its root is theirs. */
export function checkRoot(heads: readonly ArchiveHead[], roots: Roots): CheckLine {
  const check = "root against the signed tree head";
  const last = heads.at(-1);
  const { size } = roots;
  const root = roots.of(size) as Uint8Array;
  if (last === undefined) return failed(check, "heads/: no tree head");
  const faults: string[] = [];
  if (last.head.size !== size) {
    faults.push(`${last.path}: found a head of ${last.head.size} entries, the ledger has ${size}`);
  } else if (!sameBytes(last.head.root, root)) {
    faults.push(
      `${last.path}: found root ${base64(last.head.root)}, the entries have ${base64(root)}`,
    );
  }
  return judged(
    check,
    faults,
    `${base64(root)} of ${counted(size, "entry", "entries")}, as in ${last.path}`,
  );
}

/** Each head is signed by one of the archive's keys. Gives the signers of the last one. */
export function checkHeadSignatures(
  read: ReturnType<typeof readHeads>,
  keys: ReturnType<typeof readKeys>,
  verifySignature: VerifySignature,
): Checked<VerifierKey[]> {
  const faults = [...read.faults, ...keys.faults];
  if (read.heads.length === 0) faults.push("heads/: no tree head");
  const signers = new Set<string>();
  let last: VerifierKey[] | null = null;
  for (const { path, note } of read.heads) {
    const outcome = verifyTreeHead(note, keys.keys, verifySignature);
    last = outcome.ok ? outcome.signedBy : null;
    if (outcome.ok) {
      for (const { publicKey } of outcome.signedBy) signers.add(fingerprint(publicKey));
    } else {
      faults.push(`${path}: ${outcome.reason}, ${outcome.detail}`);
    }
  }
  const detail = `${counted(read.heads.length, "tree head")}, by ${[...signers].join(", ")}`;
  return { line: judged("signatures of the tree heads", faults, detail), value: last };
}

/**
 * Each head is the root of a beginning of this ledger, which is what a consistency proof between
 * any two of them would show; all name this ledger.
 */
export function checkConsistency(
  heads: readonly ArchiveHead[],
  roots: Roots,
  ledger: string,
): CheckLine {
  const check = "consistency of the tree heads";
  if (heads.length === 0) return failed(check, "heads/: no tree head");
  const faults = heads.flatMap(({ path, head }) => {
    if (head.origin !== ledger) return [`${path}: found ledger ${head.origin}, allowed ${ledger}`];
    if (roots.of(head.size) !== null) return [];
    return [`${path}: found a head of more entries than the ledger has`];
  });
  const within = heads.filter(({ head }) => roots.of(head.size) !== null);
  faults.push(...rootFaults(within, roots));
  const detail = `${counted(heads.length, "tree head")}, each of a beginning of this ledger`;
  return judged(check, faults, detail);
}

/**
 * Where a head and all later ones differ, the entries were changed, between the last head that
 * agrees and the first that doesn't. A head that differs before one that agrees is wrong itself.
 */
function rootFaults(heads: readonly ArchiveHead[], roots: Roots): string[] {
  const agrees = heads.map(({ head }) => sameBytes(head.root, roots.of(head.size) as Uint8Array));
  const lastGood = agrees.lastIndexOf(true);
  const faults = heads
    .filter((_, index) => index < lastGood && agrees[index] === false)
    .map(({ path, head }) => `${path}: ${rootsApart(head, roots)}`);
  const firstBad = heads[lastGood + 1];
  if (firstBad === undefined) return faults;
  const from = heads[lastGood]?.head.size ?? 0;
  const to = firstBad.head.size;
  const lines = to - from === 1 ? `line ${to}` : `lines ${from + 1} to ${to}`;
  const later = heads.length - lastGood - 2;
  return [
    ...faults,
    `${LEDGER}, ${lines}: not what ${firstBad.path} and ${counted(later, "later head")} signed (${rootsApart(firstBad.head, roots)})`,
  ];
}

function rootsApart(head: TreeHead, roots: Roots): string {
  const root = base64(roots.of(head.size) as Uint8Array);
  return `found root ${base64(head.root)}, the first ${head.size} entries have ${root}`;
}
