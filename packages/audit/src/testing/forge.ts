import { nodeHasher } from "@weighhouse/ledger/node-hasher";
import { signNote } from "@weighhouse/ledger/signed-note";
import type { NoteSigner } from "@weighhouse/ledger/signed-note";
import { encodeVerifierKey, fingerprint } from "@weighhouse/ledger/verifier-key";
import { canonicalJson } from "@weighhouse/ledger/canonical";
import { parseTreeHead } from "@weighhouse/ledger/tree-head";
import {
  headPath,
  jsonText,
  keyPath,
  LEDGER,
  MANIFEST,
  MANIFEST_NOTE,
  PAYLOADS,
  sizeOfHeadPath,
} from "../layout";
import { listFiles, manifestNoteText } from "../manifest";
import type { Manifest } from "../manifest";
import type { SyntheticLedger } from "./synthetic-ledger";
import { unpackFiles } from "../zip/read";
import { packFiles } from "../zip/write";

export type Change = (text: string) => string;

/** The archive with files changed, added (from "") or taken out (to ""), and nothing made good. */
export function tamper(archive: Uint8Array, changes: Record<string, Change>): Uint8Array {
  return packFiles([...changed(archive, changes)].map(([path, bytes]) => ({ path, bytes })));
}

/**
 * The same by a forger who hides the traces: a manifest of the changed files, signed by a key that
 * is put into the archive.
 */
export function forge(
  archive: Uint8Array,
  changes: Record<string, Change>,
  forger: NoteSigner,
): Uint8Array {
  const files = changed(archive, changes);
  files.set(
    keyPath(fingerprint(forger.publicKey)),
    new TextEncoder().encode(`${encodeVerifierKey(forger)}\n`),
  );
  const manifest = JSON.parse(new TextDecoder().decode(files.get(MANIFEST))) as Manifest;
  const content = [...files]
    .filter(([path]) => path !== MANIFEST && path !== MANIFEST_NOTE)
    .map(([path, bytes]) => ({ path, bytes }));
  const text = jsonText({ ...manifest, files: listFiles(nodeHasher, content) });
  const note = signNote(manifestNoteText(nodeHasher, text), forger);
  files.set(MANIFEST, new TextEncoder().encode(text));
  files.set(MANIFEST_NOTE, new TextEncoder().encode(note));
  return packFiles([...files].map(([path, bytes]) => ({ path, bytes })));
}

/**
 * The archive with another ledger in it, heads and manifest signed by the forger: entries that no
 * server would have appended, which no export could write.
 */
export function forgeLedger(
  archive: Uint8Array,
  ledger: Pick<SyntheticLedger, "entries" | "payloads" | "heads">,
  forger: NoteSigner,
): Uint8Array {
  const lines = (texts: readonly string[]) => texts.map((text) => `${text}\n`).join("");
  const old = [...unpackFiles(archive).keys()].filter((path) => sizeOfHeadPath(path) !== null);
  return forge(
    archive,
    {
      ...Object.fromEntries(old.map((path) => [path, () => ""])),
      [LEDGER]: () => lines(ledger.entries.map((entry) => canonicalJson(entry))),
      [PAYLOADS]: () => lines(ledger.payloads),
      ...Object.fromEntries(
        ledger.heads.map((note) => [headPath(parseTreeHead(note).size), () => note]),
      ),
    },
    forger,
  );
}

/** Replaces text that must be there, so that no test changes nothing. */
export function replacing(from: string | RegExp, to: string): Change {
  return (text) => {
    const after = text.replace(from, to);
    if (after === text) throw new Error(`nothing to replace: ${String(from)}`);
    return after;
  };
}

/** Changes one line, counted from 1. */
export function line(number: number, change: Change): Change {
  return (text) =>
    text
      .split("\n")
      .map((each, index) => (index === number - 1 ? change(each) : each))
      .join("\n");
}

function changed(archive: Uint8Array, changes: Record<string, Change>): Map<string, Uint8Array> {
  const files = new Map(unpackFiles(archive));
  for (const [path, change] of Object.entries(changes)) {
    const text = change(new TextDecoder().decode(files.get(path) ?? new Uint8Array(0)));
    if (text === "") files.delete(path);
    else files.set(path, new TextEncoder().encode(text));
  }
  return files;
}
