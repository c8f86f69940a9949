import type { CampaignDocument } from "@weighhouse/campaign/document";
import { readPayload } from "@weighhouse/campaign/payloads";
import type { Standings } from "@weighhouse/campaign/standings";
import { base64, utf8 } from "@weighhouse/ledger/bytes";
import { canonicalJson } from "@weighhouse/ledger/canonical";
import type { Entry } from "@weighhouse/ledger/entry";
import { nobleHasher } from "@weighhouse/ledger/noble-hasher";
import type { Hasher } from "@weighhouse/ledger/hasher";
import { signNote } from "@weighhouse/ledger/signed-note";
import { parseTreeHead, verifyTreeHead } from "@weighhouse/ledger/tree-head";
import type { TreeHeadSigner } from "@weighhouse/ledger/tree-head";
import { decodeVerifierKey, encodeVerifierKey, fingerprint } from "@weighhouse/ledger/verifier-key";
import type { VerifierKey } from "@weighhouse/ledger/verifier-key";
import { writeCsv } from "@weighhouse/tables/write-csv";
import { AuditError } from "./audit-error";
import * as layout from "./layout";
import { listFiles, manifestNoteText } from "./manifest";
import type { Manifest } from "./manifest";
import { readmeText } from "./read-me";
import { tablesOf } from "./tables";
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
  const facts = factsOf(input);
  const content = contentFiles(input, facts);
  const manifest: Manifest = { ...facts.manifest, files: listFiles(hasher, content) };
  const manifestText = layout.jsonText(manifest);
  const [readme, ...rest] = content as [ArchiveFile, ...ArchiveFile[]];
  return packFiles([
    readme,
    textFile(layout.MANIFEST, manifestText),
    textFile(layout.MANIFEST_NOTE, signNote(manifestNoteText(hasher, manifestText), input.signer)),
    ...rest,
  ]);
}

type Facts = {
  manifest: Omit<Manifest, "files">;
  lastHeadPath: string;
  headKeyPath: string;
  keys: string[];
};

function factsOf(input: ArchiveInput): Facts {
  const { entries, payloads, heads } = input;
  const last = entries.at(-1);
  const lastHead = heads.at(-1);
  if (last === undefined || lastHead === undefined || payloads.length !== entries.length) {
    throw unfit(
      `${entries.length} entries, ${payloads.length} payloads and ${heads.length} tree heads`,
      "a payload for each entry, and a head",
    );
  }
  const opened = readPayload("campaign.opened", JSON.parse(payloads[0] as string));
  if (!opened.ok) throw unfit("a first payload of another kind", "campaign.opened");
  const head = parseTreeHead(lastHead);
  const keys = [
    ...new Set([...input.keys.map((key) => key.trim()), encodeVerifierKey(input.signer)]),
  ];
  const signed = verifyTreeHead(lastHead, keys.map(decodeVerifierKey));
  if (!signed.ok)
    throw unfit(`a last head that none of the keys signed (${signed.detail})`, "a signed head");
  if (head.size !== entries.length || head.origin !== opened.value.ledger) {
    throw unfit(
      `a last head of ${head.size} entries of ${head.origin}`,
      `one of ${entries.length} entries of ${opened.value.ledger}`,
    );
  }
  return {
    manifest: {
      format: layout.ARCHIVE_FORMAT,
      campaign: last.campaign,
      ledger: opened.value.ledger,
      size: head.size,
      root: base64(head.root),
      at: last.at,
      clock: opened.value.clock,
      engine: input.engine,
    },
    lastHeadPath: layout.headPath(head.size),
    headKeyPath: layout.keyPath(fingerprint((signed.signedBy[0] as VerifierKey).publicKey)),
    keys,
  };
}

/** Every file but the manifest's own, the README first. */
function contentFiles(input: ArchiveInput, facts: Facts): ArchiveFile[] {
  const signedBy = fingerprint(input.signer.publicKey);
  const readme = readmeText({
    ...facts.manifest,
    title: input.document.campaign.title,
    fingerprint: signedBy,
    keyPath: layout.keyPath(signedBy),
    lastHeadPath: facts.lastHeadPath,
    headKeyPath: facts.headKeyPath,
  });
  return [
    textFile(layout.README, readme),
    textFile(layout.DOCUMENT, layout.jsonText(input.document)),
    textFile(layout.STANDINGS, layout.jsonText(input.standings)),
    ...tablesOf(input.document, input.standings).map(({ name, header, rows }) =>
      textFile(layout.tablePath(name), writeCsv(header, rows)),
    ),
    textFile(layout.LEDGER, lines(input.entries.map(canonicalJson))),
    textFile(layout.PAYLOADS, lines(input.payloads)),
    ...input.heads.map((note) => textFile(layout.headPath(parseTreeHead(note).size), note)),
    ...facts.keys.map((key) =>
      textFile(layout.keyPath(fingerprint(decodeVerifierKey(key).publicKey)), `${key}\n`),
    ),
  ];
}

function lines(texts: readonly string[]): string {
  return texts.map((text) => `${text}\n`).join("");
}

function textFile(path: string, text: string): ArchiveFile {
  return { path, bytes: utf8(text) };
}

function unfit(found: string, allowed: string): AuditError {
  return new AuditError("unfit-input", `found ${found}; an archive is of ${allowed}`);
}
