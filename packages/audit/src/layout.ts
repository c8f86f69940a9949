/** Where things stand in an archive. */
export const ARCHIVE_FORMAT = "weighhouse-audit/1";

/**
 * Any change of the words, drawings or layout of the files for readers (README, methods, TeX, figures,
 * RO-Crate, check.py) changes this: what another writer wrote is not compared word by word.
 */
export const WRITER_VERSION = "2";

export const README = "README.md";
export const MANIFEST = "manifest.json";
export const MANIFEST_NOTE = "manifest.note";
export const LEDGER = "ledger.ndjson";
export const PAYLOADS = "payloads.ndjson";
export const DOCUMENT = "campaign.json";
export const STANDINGS = "standings.json";
export const SENSITIVITY = "sensitivity.json";
export const CRATE = "ro-crate-metadata.json";
export const METHODS = "methods.md";
export const CHECK_PROGRAM = "check.py";

/** Padded, so that the names sort by size. */
export function headPath(size: number): string {
  return `heads/${String(size).padStart(10, "0")}.note`;
}

/** The size in a head's path, or null for another path. */
export function sizeOfHeadPath(path: string): number | null {
  const digits = /^heads\/(\d{10})\.note$/.exec(path)?.[1];
  return digits === undefined ? null : Number(digits);
}

/** The RFC 3161 token of the head of that size. */
export function tokenPath(size: number): string {
  return `heads/${String(size).padStart(10, "0")}.tsr`;
}

/** The size in a token's path, or null for another path. */
export function sizeOfTokenPath(path: string): number | null {
  const digits = /^heads\/(\d{10})\.tsr$/.exec(path)?.[1];
  return digits === undefined ? null : Number(digits);
}

export function keyPath(fingerprint: string): string {
  return `keys/${fingerprint.slice(0, 16)}.pub`;
}

export const TABLE_NAMES = [
  "hypotheses",
  "predictions",
  "measurements",
  "verdicts",
  "standings",
  "timeline",
] as const;
export type TableName = (typeof TABLE_NAMES)[number];

export function tablePath(name: TableName): string {
  return `tables/${name}.csv`;
}

/** Tables that are printed; the timeline is a figure. */
export const TEX_NAMES = [
  "hypotheses",
  "predictions",
  "measurements",
  "verdicts",
  "standings",
] as const satisfies readonly TableName[];
export type TexName = (typeof TEX_NAMES)[number];

export function texPath(name: TexName): string {
  return `tables/${name}.tex`;
}

/** Figures of the whole campaign; each measurand has one more. */
export const FIGURE_NAMES = ["beam", "grid", "timeline"] as const;

export function figurePath(name: string): string {
  return `figures/${name}.svg`;
}

/** Keys of measurands may be any figure's name, so theirs stand in a folder. */
export function measurandFigurePath(key: string): string {
  return `figures/measurands/${key}.svg`;
}

function isFigurePath(path: string): boolean {
  return /^figures\/(beam|grid|timeline|measurands\/[a-z0-9-]+)\.svg$/.test(path);
}

const KNOWN = new Set<string>([
  README,
  MANIFEST,
  MANIFEST_NOTE,
  LEDGER,
  PAYLOADS,
  DOCUMENT,
  STANDINGS,
  SENSITIVITY,
  CRATE,
  METHODS,
  CHECK_PROGRAM,
  ...TABLE_NAMES.map(tablePath),
  ...TEX_NAMES.map(texPath),
]);

/** True for a path that this version writes, and whose content `verifyArchive` therefore checks. */
export function isKnownPath(path: string): boolean {
  return (
    KNOWN.has(path) ||
    sizeOfHeadPath(path) !== null ||
    sizeOfTokenPath(path) !== null ||
    isKeyPath(path) ||
    isFigurePath(path)
  );
}

export function isKeyPath(path: string): boolean {
  return /^keys\/[0-9a-f]{16}\.pub$/.test(path);
}

/**
 * A JSON object as a file of the archive, in one form only: each member on a line, each item of a
 * list that is a member on a line of its own. A measurement, a verdict, a file is then one line,
 * which a reader can find and a difference can name, and long lists stay small.
 */
export function jsonText(value: object): string {
  const members = Object.entries(value).map(([name, member]) => {
    const text = Array.isArray(member) ? listText(member) : JSON.stringify(member);
    return `  ${JSON.stringify(name)}: ${text}`;
  });
  return `{\n${members.join(",\n")}\n}\n`;
}

function listText(items: readonly unknown[]): string {
  if (items.length === 0) return "[]";
  return `[\n${items.map((item) => `    ${JSON.stringify(item)}`).join(",\n")}\n  ]`;
}
