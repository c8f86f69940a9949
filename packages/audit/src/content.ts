import type { LedgerRecord } from "@weighhouse/campaign/changes";
import type { CampaignDocument } from "@weighhouse/campaign/document";
import type { Standings } from "@weighhouse/campaign/standings";
import { utf8 } from "@weighhouse/ledger/bytes";
import { writeCsv } from "@weighhouse/tables/write-csv";
import { checkProgram } from "./check-program";
import { figuresOf } from "./figures";
import * as layout from "./layout";
import type { Manifest } from "./manifest";
import { methodsText } from "./methods";
import { readmeText } from "./read-me";
import { crateOf } from "./ro-crate";
import type { Signing } from "./signing";
import { tablesOf } from "./tables";
import type { TimelineRow } from "./timeline";
import { texTables } from "./tex/tables";
import type { ArchiveFile } from "./zip/write";

/** What the files for readers are made of. */
export type Substance = {
  document: CampaignDocument;
  standings: Standings;
  timeline: readonly TimelineRow[];
  records: readonly LedgerRecord[];
  manifest: Omit<Manifest, "files">;
};

/** `tables/*.csv`. */
export function csvFiles({ document, standings, timeline }: Substance): ArchiveFile[] {
  return tablesOf(document, standings, timeline).map(({ name, header, rows }) =>
    textFile(layout.tablePath(name), writeCsv(header, rows)),
  );
}

/** `tables/*.tex`. */
export function texFiles({ document, standings }: Substance): ArchiveFile[] {
  return texTables(document, standings).map(({ name, text }) =>
    textFile(layout.texPath(name), text),
  );
}

/** `figures/*.svg`. */
export function figureFiles({ document, standings, timeline }: Substance): ArchiveFile[] {
  return figuresOf(document, standings, timeline).map(({ path, svg }) => textFile(path, svg));
}

/** README.md, methods.md and check.py. */
export function proseFiles(substance: Substance, signing: Signing): ArchiveFile[] {
  const { document, standings, records, manifest } = substance;
  const { root, leftOut } = manifest;
  const readme = readmeText({ ...manifest, ...signing, title: document.campaign.title });
  const methods = methodsText({ document, standings, records, root, leftOut });
  return [
    textFile(layout.README, readme),
    textFile(layout.METHODS, methods),
    textFile(layout.CHECK_PROGRAM, checkProgram),
  ];
}

/** ro-crate-metadata.json, which describes all other files. */
export function crateFile(
  { document, records, manifest }: Substance,
  files: Manifest["files"],
): ArchiveFile {
  return textFile(layout.CRATE, layout.jsonText(crateOf({ document, records, manifest, files })));
}

export function textFile(path: string, text: string): ArchiveFile {
  return { path, bytes: utf8(text) };
}
