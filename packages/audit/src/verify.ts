import type { LedgerRecord } from "@weighhouse/campaign/changes";
import type { CampaignDocument } from "@weighhouse/campaign/document";
import type { Standings } from "@weighhouse/campaign/standings";
import { sensitivityOf } from "@weighhouse/engine/sensitivity/sensitivity";
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
import { CHECKS, notChecked } from "./checks/line";
import type { CheckLine, CheckName, VerifyReport } from "./checks/line";
import { checkManifest, checkManifestFacts, checkManifestNote } from "./checks/manifest";
import type { Manifest } from "./manifest";
import { checkOrder } from "./checks/order";
import { checkRules } from "./checks/rules";
import { checkSeals } from "./checks/seals";
import { checkSensitivity } from "./checks/sensitivity";
import type { Sense } from "./checks/sensitivity";
import { checkFigures } from "./checks/figures";
import { checkTexts } from "./checks/texts";
import { checkTimeStamps } from "./checks/time-stamps";
import type { VerifyToken } from "./checks/time-stamps";
import { checkTimeline } from "./checks/timeline";
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
  /** What standings hang on; the engine's `sensitivityOf` unless given. */
  sensitivity?: Sense;
  /** Verifies RFC 3161 tokens; an archive that has some fails without. */
  verifyToken?: VerifyToken;
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
  add(checkTimeStamps(files, readHeads(files).heads, options.verifyToken));
  verifyContent(
    files,
    { entries: entries.value, roots, opening, manifest: manifest.value, signers },
    options,
    add,
  );
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

type ContentParts = {
  entries: ReadEntries | null;
  roots: Roots | null;
  opening: Opening | null;
  manifest: Manifest | null;
  signers: Signers;
};

/** What needs the entries' content, in the order in which one thing rests on another. */
const CONTENT = [
  "payloads",
  "rules of the entries",
  "seals",
  "campaign document",
  "before and after data",
  "standings",
  "timeline",
  "sensitivity",
  "tables",
  "figures",
  "texts",
] as const satisfies readonly CheckName[];

/** The checks from one on can't be made. */
function refuseFrom(first: (typeof CONTENT)[number], because: CheckName, add: Add): void {
  for (const check of CONTENT.slice(CONTENT.indexOf(first))) add(notChecked(check, because));
}

function verifyContent(files: Files, parts: ContentParts, options: VerifyOptions, add: Add): void {
  const { entries, roots, opening } = parts;
  if (entries === null || roots === null) {
    return refuseFrom("payloads", "entries: hash and order", add);
  }
  const payloads = checkPayloads(files, entries.entries, options.hasher);
  add(payloads.line);
  const records = payloads.value;
  if (records === null || opening === null) {
    return refuseFrom("rules of the entries", "payloads", add);
  }
  add(checkSeals(records, { ledger: opening.ledger, hasher: options.hasher }));
  const folded = checkRules(records);
  add(folded.line);
  if (folded.value === null) {
    return refuseFrom("campaign document", "rules of the entries", add);
  }
  const document = checkDocument(files, folded.value);
  add(document.line);
  if (document.value === null) {
    return refuseFrom("before and after data", "campaign document", add);
  }
  verifyScores(files, { ...parts, records, document: document.value, roots }, options, add);
}

type ScoreParts = ContentParts & {
  records: LedgerRecord[];
  document: CampaignDocument;
  roots: Roots;
};

function verifyScores(files: Files, parts: ScoreParts, options: VerifyOptions, add: Add): void {
  const { records, document, roots } = parts;
  const asOf = { size: roots.size, treeHead: base64(roots.of(roots.size) as Uint8Array) };
  const standings = checkStandings(files, { document, asOf }, options.score);
  if (standings.value === null) {
    refuseFrom("before and after data", "standings", add);
    add(standings.line);
    return;
  }
  add(standings.line);
  add(checkOrder(records, document, standings.value));
  const sense = options.sensitivity ?? sensitivityOf;
  add(checkSensitivity(files, { document, standings: standings.value }, sense));
  verifyReading(files, { ...parts, standings: standings.value }, options, add);
}

/** The files for readers, made again from what was found in the archive. */
function verifyReading(
  files: Files,
  parts: ScoreParts & { standings: Standings },
  options: VerifyOptions,
  add: Add,
): void {
  const { records, document, standings, manifest, signers } = parts;
  const heads = readHeads(files).heads.map(({ head }) => head.size);
  const timeline = checkTimeline(files, { records, heads, standings }, options.score);
  add(timeline.line);
  if (timeline.value === null) return refuseFrom("tables", "timeline", add);
  if (manifest === null) return refuseFrom("tables", "files against the manifest", add);
  const { files: listed, ...facts } = manifest;
  const substance = { document, standings, timeline: timeline.value, records, manifest: facts };
  add(checkTables(files, substance));
  add(checkFigures(files, substance));
  add(checkTexts(files, substance, { listed, signers }));
}
