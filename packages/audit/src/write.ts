import type { LedgerRecord } from "@weighhouse/campaign/changes";
import type { CampaignDocument } from "@weighhouse/campaign/document";
import type { EntryKind } from "@weighhouse/campaign/entries";
import { readPayload } from "@weighhouse/campaign/payloads";
import type { Sensitivity } from "@weighhouse/campaign/sensitivity";
import type { Standings } from "@weighhouse/campaign/standings";
import { scoreCampaign } from "@weighhouse/engine/score";
import { sensitivityOf } from "@weighhouse/engine/sensitivity/sensitivity";
import { base64 } from "@weighhouse/ledger/bytes";
import { canonicalJson } from "@weighhouse/ledger/canonical";
import type { Entry } from "@weighhouse/ledger/entry";
import { nobleHasher } from "@weighhouse/ledger/noble-hasher";
import type { Hasher } from "@weighhouse/ledger/hasher";
import { signNote } from "@weighhouse/ledger/signed-note";
import { parseTreeHead, verifyTreeHead } from "@weighhouse/ledger/tree-head";
import type { TreeHead, TreeHeadSigner } from "@weighhouse/ledger/tree-head";
import { decodeVerifierKey, encodeVerifierKey, fingerprint } from "@weighhouse/ledger/verifier-key";
import type { VerifierKey } from "@weighhouse/ledger/verifier-key";
import { AuditError } from "./audit-error";
import { crateFile, csvFiles, figureFiles, proseFiles, texFiles, textFile } from "./content";
import type { Substance } from "./content";
import { keptHeads } from "./kept-heads";
import * as layout from "./layout";
import { leftOutOf, sensitivityLeftOut } from "./left-out";
import { linesFile } from "./lines-file";
import { listFiles, manifestNoteText } from "./manifest";
import type { Manifest } from "./manifest";
import { signingOf } from "./signing";
import type { Signing } from "./signing";
import { timelineOf, timelineSizes } from "./timeline";
import { packFiles } from "./zip/write";
import type { ArchiveFile } from "./zip/write";

export type ArchiveInput = {
  /** All entries, from 0. */
  entries: readonly Entry[];
  /** Canonical text of each entry's payload, in the same order. */
  payloads: readonly string[];
  /** The signed tree heads, one for each transaction, in order; the last covers all entries. */
  heads: readonly string[];
  /** Verifier keys (texts) of all that signed heads. */
  keys: readonly string[];
  /** As of all entries. */
  document: CampaignDocument;
  standings: Standings;
  /** Version of the engine that computed the standings. */
  engine: string;
  /**
   * What the standings hang on, where it was computed before; else it is computed here, if that
   * takes seconds and not minutes, or left out with the reason.
   */
  sensitivity?: Sensitivity;
  /** RFC 3161 tokens (DER) over heads' notes, by the size of the head. */
  timeStamps?: readonly { size: number; token: Uint8Array }[];
  /** Members who published who they are; all others stay opaque ids. */
  people?: Manifest["people"];
  /** Address of the licence. */
  licence?: string | null;
  /** Signs the manifest. */
  signer: TreeHeadSigner;
  /** SHA-256; plain JavaScript's unless given. */
  hasher?: Hasher;
};

/**
 * The audit trail of a campaign: one ZIP, the same bytes for the same input (Ed25519 signatures are
 * deterministic).
 *
 * @throws {AuditError} `unfit-input` where the parts are not of one ledger; `too-large`
 */
export function writeArchive(input: ArchiveInput): Uint8Array {
  const hasher = input.hasher ?? nobleHasher;
  const heads = input.heads.map((note) => ({ note, head: parseTreeHead(note) }));
  const ledger = ledgerOf(input, heads);
  const content = contentFiles(input, ledger, hasher);
  const manifest: Manifest = { ...ledger.manifest, files: listFiles(hasher, content) };
  const manifestText = layout.jsonText(manifest);
  const [readme, ...rest] = content as [ArchiveFile, ...ArchiveFile[]];
  return packFiles([
    readme,
    textFile(layout.MANIFEST, manifestText),
    textFile(layout.MANIFEST_NOTE, signNote(manifestNoteText(hasher, manifestText), input.signer)),
    ...rest,
  ]);
}

type SignedHead = { note: string; head: TreeHead };

type Ledger = {
  records: LedgerRecord[];
  heads: SignedHead[];
  keys: string[];
  sensitivity: Sensitivity | null;
  signing: Signing;
  manifest: Omit<Manifest, "files">;
};

function ledgerOf(input: ArchiveInput, signed: readonly SignedHead[]): Ledger {
  const { entries, payloads, document, standings } = input;
  const last = entries.at(-1);
  const lastHead = signed.at(-1);
  if (last === undefined || lastHead === undefined || payloads.length !== entries.length) {
    throw unfit(
      `${entries.length} entries, ${payloads.length} payloads and ${signed.length} tree heads`,
      "a payload for each entry, and a head",
    );
  }
  const opened = readPayload("campaign.opened", JSON.parse(payloads[0] as string));
  if (!opened.ok) throw unfit("a first payload of another kind", "campaign.opened");
  const { ledger, clock } = opened.value;
  const { head } = lastHead;
  const keys = [
    ...new Set([...input.keys.map((key) => key.trim()), encodeVerifierKey(input.signer)]),
  ];
  const signers = verifyTreeHead(lastHead.note, keys.map(decodeVerifierKey));
  if (!signers.ok)
    throw unfit(`a last head that none of the keys signed (${signers.detail})`, "a signed head");
  if (head.size !== entries.length || head.origin !== ledger) {
    throw unfit(
      `a last head of ${head.size} entries of ${head.origin}`,
      `one of ${entries.length} entries of ${ledger}`,
    );
  }
  const records = recordsOf(entries, payloads);
  const heads = headsToKeep(signed, records, input.timeStamps ?? []);
  const sensitivity = sensitivityFor(input);
  const counts = { signed: signed.length, kept: heads.length };
  const leftOut = leftOutOf({
    document,
    standings,
    heads: counts,
    hasSensitivity: sensitivity !== null,
  });
  return {
    records,
    heads,
    keys,
    sensitivity,
    signing: signingOf(input.signer, signers.signedBy[0] as VerifierKey, {
      size: head.size,
      stamped: input.timeStamps?.length ?? 0,
    }),
    manifest: {
      format: layout.ARCHIVE_FORMAT,
      writer: layout.WRITER_VERSION,
      campaign: last.campaign,
      ledger,
      size: head.size,
      root: base64(head.root),
      at: last.at,
      clock,
      engine: input.engine,
      heads: counts,
      leftOut,
      licence: input.licence ?? null,
      people: [...(input.people ?? [])],
    },
  };
}

/** @throws {AuditError} `unfit-input` for a payload that is none of its entry's kind */
function recordsOf(entries: readonly Entry[], payloads: readonly string[]): LedgerRecord[] {
  return entries.map(({ seq, at, by, kind }, index) => {
    const read = readPayload(kind as EntryKind, JSON.parse(payloads[index] as string));
    if (!read.ok)
      throw unfit(`entry ${seq} with a payload of no ${kind}`, "payloads of their kinds");
    return { seq, at, by, kind: kind as EntryKind, payload: read.value };
  });
}

function headsToKeep(
  signed: readonly SignedHead[],
  records: readonly LedgerRecord[],
  timeStamps: NonNullable<ArchiveInput["timeStamps"]>,
): SignedHead[] {
  const sizes = signed.map(({ head }) => head.size);
  const stamped = timeStamps.map(({ size }) => size);
  const stray = stamped.find((size) => !sizes.includes(size));
  if (stray !== undefined) {
    throw unfit(`a time-stamp of a head of size ${stray}`, "time-stamps of heads in it");
  }
  const kept = keptHeads(sizes, records, stamped);
  return signed.filter(({ head }) => kept.has(head.size));
}

function sensitivityFor({ document, standings, sensitivity }: ArchiveInput): Sensitivity | null {
  if (sensitivity !== undefined) return sensitivity;
  if (sensitivityLeftOut(standings) !== null) return null;
  const computed = sensitivityOf(document);
  if (!computed.ok) throw unfit("a document that can't be scored", "a document with its standings");
  return computed.value;
}

/** Every file but the manifest's own, the README first. */
function contentFiles(input: ArchiveInput, ledger: Ledger, hasher: Hasher): ArchiveFile[] {
  const { document, standings } = input;
  const { records, heads, sensitivity } = ledger;
  const sizes = timelineSizes(
    records,
    heads.map(({ head }) => head.size),
    standings,
  );
  const timeline = timelineOf(records, sizes, { standings, score: scoreCampaign });
  const substance: Substance = {
    document,
    standings,
    timeline,
    records,
    manifest: ledger.manifest,
  };
  const files = [
    ...proseFiles(substance, ledger.signing),
    textFile(layout.DOCUMENT, layout.jsonText(document)),
    textFile(layout.STANDINGS, layout.jsonText(standings)),
    ...(sensitivity === null ? [] : [textFile(layout.SENSITIVITY, layout.jsonText(sensitivity))]),
    ...csvFiles(substance),
    ...texFiles(substance),
    ...figureFiles(substance),
    linesFile(layout.LEDGER, input.entries.map(canonicalJson)),
    linesFile(layout.PAYLOADS, input.payloads),
    ...heads.map(({ note, head }) => textFile(layout.headPath(head.size), note)),
    ...(input.timeStamps ?? []).map(({ size, token }) => ({
      path: layout.tokenPath(size),
      bytes: token,
    })),
    ...ledger.keys.map((key) =>
      textFile(layout.keyPath(fingerprint(decodeVerifierKey(key).publicKey)), `${key}\n`),
    ),
  ];
  const [readme, ...rest] = files as [ArchiveFile, ...ArchiveFile[]];
  return [readme, crateFile(substance, listFiles(hasher, files)), ...rest];
}

function unfit(found: string, allowed: string): AuditError {
  return new AuditError("unfit-input", `found ${found}; an archive is of ${allowed}`);
}
