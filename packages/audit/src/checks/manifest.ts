import { hex } from "@weighhouse/ledger/bytes";
import type { Hasher } from "@weighhouse/ledger/hasher";
import { verifyNote } from "@weighhouse/ledger/signed-note";
import type { VerifySignature } from "@weighhouse/ledger/signed-note";
import type { VerifierKey } from "@weighhouse/ledger/verifier-key";
import { fingerprint } from "@weighhouse/ledger/verifier-key";
import { readJson, readText } from "./archive-text";
import type { Files } from "./container";
import { counted, failed, judged, ok } from "./line";
import type { Checked, CheckLine } from "./line";
import { compareJson } from "./differences";
import { isKnownPath, MANIFEST, MANIFEST_NOTE } from "../layout";
import { manifestNoteText, manifestSchema } from "../manifest";
import type { Manifest } from "../manifest";

/** Every file is in the manifest with its size and SHA-256, and nothing else is in the archive. */
export function checkManifest(files: Files, hasher: Hasher): Checked<Manifest> {
  const check = "files against the manifest";
  const read = readJson(files, MANIFEST);
  if (!read.ok) return { line: failed(check, read.fault), value: null };
  const parsed = manifestSchema.safeParse(read.value);
  if (!parsed.success) {
    const places = parsed.error.issues.map(
      ({ path, message }) => `${MANIFEST}, /${path.join("/")}: ${message}`,
    );
    return { line: failed(check, places), value: null };
  }
  const manifest = parsed.data;
  const listed = new Map(manifest.files.map((file) => [file.path, file]));
  const faults = manifest.files.flatMap((file) => fileFaults(file, files, hasher));
  if (listed.size !== manifest.files.length) faults.push(`${MANIFEST} names a file twice`);
  for (const path of files.keys()) {
    if (path === MANIFEST || path === MANIFEST_NOTE) continue;
    if (!listed.has(path)) faults.push(`${path} is not in the manifest`);
    else if (!isKnownPath(path)) faults.push(`${path} is unknown to this version, not checked`);
  }
  const detail = `${counted(manifest.files.length, "file")}, each with its size and SHA-256`;
  return { line: judged(check, faults, detail), value: manifest };
}

function fileFaults(file: Manifest["files"][number], files: Files, hasher: Hasher): string[] {
  const bytes = files.get(file.path);
  if (bytes === undefined) return [`${file.path} is in the manifest and missing`];
  const sha256 = hex(hasher(bytes));
  if (bytes.length === file.bytes && sha256 === file.sha256) return [];
  return [
    `${file.path}: found ${bytes.length} bytes with SHA-256 ${sha256}, the manifest names ${file.bytes} with ${file.sha256}`,
  ];
}

/** `manifest.note` signs this manifest, by one of the archive's keys. */
export function checkManifestNote(
  files: Files,
  keys: readonly VerifierKey[],
  { hasher, verifySignature }: { hasher: Hasher; verifySignature: VerifySignature },
): Checked<VerifierKey[]> {
  const check = "signature of the manifest";
  const manifest = readText(files, MANIFEST);
  const note = readText(files, MANIFEST_NOTE);
  if (!manifest.ok) return { line: failed(check, manifest.fault), value: null };
  if (!note.ok) return { line: failed(check, note.fault), value: null };
  const verified = verifyNote(note.text, keys, verifySignature);
  if (!verified.ok) {
    const fault = `${MANIFEST_NOTE}: ${verified.reason}, ${verified.detail}`;
    return { line: failed(check, fault), value: null };
  }
  if (verified.text !== manifestNoteText(hasher, manifest.text)) {
    const fault = `${MANIFEST_NOTE}, line 2: signs another SHA-256 than that of ${MANIFEST}`;
    return { line: failed(check, fault), value: null };
  }
  const names = verified.signedBy.map(({ publicKey }) => fingerprint(publicKey)).join(", ");
  return { line: ok(check, `by ${names}`), value: verified.signedBy };
}

/** What the manifest says of the ledger is what the ledger says of itself. */
export function checkManifestFacts(
  manifest: Manifest,
  computed: Partial<Omit<Manifest, "files" | "format">>,
): CheckLine {
  const { differences } = compareJson(
    Object.fromEntries(
      Object.keys(computed).map((name) => [name, manifest[name as keyof Manifest]]),
    ),
    computed,
    { tolerance: 0 },
  );
  return judged(
    "manifest against the ledger",
    differences.map((difference) => `${MANIFEST}, ${difference}`),
    `${Object.keys(computed).join(", ")} as computed`,
  );
}
