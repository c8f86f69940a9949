import type { LedgerRecord } from "@weighhouse/campaign/changes";
import type { CampaignDocument } from "@weighhouse/campaign/document";
import type { Standings } from "@weighhouse/campaign/standings";
import { base64 } from "@weighhouse/ledger/bytes";
import type { Hasher } from "@weighhouse/ledger/hasher";
import { nobleVerifySignature } from "@weighhouse/ledger/signed-note";
import type { VerifySignature } from "@weighhouse/ledger/signed-note";
import { checkClock, openingOf } from "./checks/clock";
import type { Opening } from "./checks/clock";
import { checkContainer } from "./checks/container";
import type { Files } from "./checks/container";
import { checkDocument } from "./checks/document";
import { checkEntries, checkPayloads } from "./checks/entries";
import type { ReadEntries } from "./checks/entries";
import {
  checkConsistency,
  checkHeadSignatures,
  checkRoot,
  readHeads,
  readKeys,
  rootsOf,
} from "./checks/heads";
import type { Roots } from "./checks/heads";
import { CHECKS, counted, failed, notChecked, notPresent } from "./checks/line";
import type { CheckLine, CheckName, VerifyReport } from "./checks/line";
import { checkManifest, checkManifestFacts, checkManifestNote } from "./checks/manifest";
import type { Manifest } from "./manifest";
import { checkOrder } from "./checks/order";
import { checkStandings, readStandings } from "./checks/standings";
import type { Score } from "./checks/standings";
import { checkTables } from "./checks/tables";
import { checkHeadHeld, checkKeysHeld } from "./checks/trust";
import type { Signers } from "./checks/trust";
import { ZIP_LIMITS } from "./zip/limits";
import type { ZipLimits } from "./zip/limits";

export type VerifyOptions = {
  /** SHA-256: `nodeHasher` or `nobleHasher`. */
  hasher: Hasher;
  /** Ed25519; plain JavaScript's unless given. */
  verifySignature?: VerifySignature;
  /** The engine: `scoreCampaign`. */
  score: Score;
  /** Texts of key files (verifier keys) that the reader had before. */
  trustedKeys?: readonly string[];
  /** Text of a tree head's note that the reader kept. */
  trustedHead?: string;
  limits?: ZipLimits;
};

/**
 * Recomputes everything in an audit trail: a line for each check, in the order of CHECKS. Never
 * throws on what is in the archive: it is hostile until proven otherwise.
 */
export function verifyArchive(archive: Uint8Array, options: VerifyOptions): VerifyReport {
  const lines = new Map<CheckName, CheckLine>();
  const add = (line: CheckLine) => lines.set(line.check, line);
  const container = checkContainer(archive, options.limits ?? ZIP_LIMITS);
  add(container.line);
  if (container.value !== null) verifyFiles(container.value, options, add);
  const report = CHECKS.map((check) => lines.get(check) ?? notChecked(check, "container"));
  return { ok: report.every(({ outcome }) => outcome !== "failed"), lines: report };
}

type Add = (line: CheckLine) => void;

function verifyFiles(files: Files, options: VerifyOptions, add: Add): void {
  const manifest = checkManifest(files, options.hasher);
  add(manifest.line);
  const entries = checkEntries(files, options.hasher);
  add(entries.line);
  const opening = openingOf(files);
  add(checkClock(opening));
  const roots = entries.value === null ? null : rootsOf(entries.value.leaves, options.hasher);
  const signers = verifySignatures(files, options, add);
  add(checkKeysHeld(signers, options.trustedKeys ?? []));
  verifyTree(files, { roots, opening, trustedHead: options.trustedHead }, add);
  const { standings } = readStandings(files);
  add(factsLine(manifest.value, { entries: entries.value, roots, opening, standings }));
  verifyContent(files, { entries: entries.value, roots }, options, add);
}

function verifySignatures(files: Files, options: VerifyOptions, add: Add): Signers {
  const verifySignature = options.verifySignature ?? nobleVerifySignature;
  const keys = readKeys(files);
  const note = checkManifestNote(files, keys.keys, { hasher: options.hasher, verifySignature });
  add(note.line);
  const heads = checkHeadSignatures(readHeads(files), keys, verifySignature);
  add(heads.line);
  return { head: heads.value, manifest: note.value };
}

type TreeParts = { roots: Roots | null; opening: Opening | null; trustedHead: string | undefined };

function verifyTree(files: Files, { roots, opening, trustedHead }: TreeParts, add: Add): void {
  const { heads } = readHeads(files);
  if (roots === null || opening === null) {
    const because = roots === null ? "entries: hash and order" : "payloads";
    for (const check of [
      "root against the signed tree head",
      "consistency of the tree heads",
      "tree head you hold",
    ] as const) {
      add(notChecked(check, because));
    }
    return;
  }
  add(checkRoot(heads, roots));
  add(checkConsistency(heads, roots, opening.ledger));
  add(checkHeadHeld(trustedHead, roots, opening.ledger));
}

type FactParts = {
  entries: ReadEntries | null;
  roots: Roots | null;
  opening: Opening | null;
  standings: Standings | null;
};

function factsLine(
  manifest: Manifest | null,
  { entries, roots, opening, standings }: FactParts,
): CheckLine {
  const check = "manifest against the ledger";
  const last = entries?.entries.at(-1) ?? null;
  if (manifest === null) return notChecked(check, "files against the manifest");
  if (last === null || roots === null) return notChecked(check, "entries: hash and order");
  if (opening === null) return notChecked(check, "payloads");
  return checkManifestFacts(manifest, {
    campaign: last.campaign,
    ledger: opening.ledger,
    size: roots.size,
    root: base64(roots.of(roots.size) as Uint8Array),
    at: last.at,
    clock: opening.clock,
    ...(standings === null ? {} : { engine: standings.engine }),
  });
}

type ContentParts = { entries: ReadEntries | null; roots: Roots | null };

function verifyContent(files: Files, parts: ContentParts, options: VerifyOptions, add: Add): void {
  const { entries, roots } = parts;
  const content = ["campaign document", "before and after data", "standings", "tables"] as const;
  const refuseFrom = (from: number, because: CheckName) => {
    for (const check of content.slice(from)) add(notChecked(check, because));
  };
  if (entries === null || roots === null) {
    add(notChecked("payloads", "entries: hash and order"));
    addAbsent(files, null, add);
    return refuseFrom(0, "entries: hash and order");
  }
  const payloads = checkPayloads(files, entries.entries, options.hasher);
  add(payloads.line);
  addAbsent(files, payloads.value, add);
  if (payloads.value === null) return refuseFrom(0, "payloads");
  const document = checkDocument(files, payloads.value);
  add(document.line);
  if (document.value === null) return refuseFrom(1, "campaign document");
  verifyScores(files, { records: payloads.value, document: document.value, roots }, options, add);
}

type ScoreParts = { records: LedgerRecord[]; document: CampaignDocument; roots: Roots };

function verifyScores(files: Files, parts: ScoreParts, options: VerifyOptions, add: Add): void {
  const { records, document, roots } = parts;
  const asOf = { size: roots.size, treeHead: base64(roots.of(roots.size) as Uint8Array) };
  const standings = checkStandings(files, { document, asOf }, options.score);
  add(standings.line);
  if (standings.value === null) {
    add(notChecked("before and after data", "standings"));
    add(notChecked("tables", "standings"));
    return;
  }
  add(checkOrder(records, document, standings.value));
  add(checkTables(files, document, standings.value));
}

/** What this version's archives don't hold: said, never passed over. */
function addAbsent(files: Files, records: LedgerRecord[] | null, add: Add): void {
  add(
    records === null
      ? notChecked("seals", "payloads")
      : notPresent("seals", `none among ${counted(records.length, "entry", "entries")}`),
  );
  const unknown = (check: CheckName, paths: string[]) =>
    paths.length === 0
      ? notPresent(check, "none")
      : failed(check, `this version can't check ${counted(paths.length, "file")}: ${paths[0]}`);
  const paths = [...files.keys()];
  add(
    unknown(
      "time-stamps",
      paths.filter((path) => path.endsWith(".tsr")),
    ),
  );
  add(
    unknown(
      "figures",
      paths.filter((path) => path.startsWith("figures/")),
    ),
  );
}
