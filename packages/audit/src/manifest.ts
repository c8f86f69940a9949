import * as z from "zod";
import { utf8, hex } from "@weighhouse/ledger/bytes";
import type { Hasher } from "@weighhouse/ledger/hasher";
import { ARCHIVE_FORMAT } from "./layout";
import type { ArchiveFile } from "./zip/write";

/** What an archive is of, and the SHA-256 of every file in it but the manifest's own two. */
export const manifestSchema = z.strictObject({
  format: z.literal(ARCHIVE_FORMAT),
  /** Version of the program's part that wrote the files for readers. */
  writer: z.string(),
  campaign: z.string(),
  /** The ledger's id: the origin line of its tree heads. */
  ledger: z.string(),
  /** Number of entries. */
  size: z.int().positive(),
  /** Root of the tree of that size, base64. */
  root: z.string(),
  /** Time of the last entry. */
  at: z.string(),
  clock: z.enum(["real", "simulated"]),
  engine: z.string(),
  /** Tree heads that were signed, and how many of them are in the archive. */
  heads: z.strictObject({ signed: z.int().positive(), kept: z.int().positive() }),
  /** What is not in the archive though it might be expected, each with the reason, in words. */
  leftOut: z.array(z.string()),
  /** Address of the licence, where one was given. */
  licence: z.string().nullable(),
  /** Members who published who they are; all others stay opaque ids. */
  people: z.array(
    z.strictObject({ member: z.string(), name: z.string(), orcid: z.string().nullable() }),
  ),
  files: z.array(
    z.strictObject({ path: z.string(), bytes: z.int().nonnegative(), sha256: z.string() }),
  ),
});

export type Manifest = z.output<typeof manifestSchema>;

export function listFiles(hasher: Hasher, files: readonly ArchiveFile[]): Manifest["files"] {
  return files.map(({ path, bytes }) => ({
    path,
    bytes: bytes.length,
    sha256: hex(hasher(bytes)),
  }));
}

/** The text that `manifest.note` signs. No tree head reads like it, so neither passes for the other. */
export function manifestNoteText(hasher: Hasher, manifestText: string): string {
  return `weighhouse-manifest/1\n${hex(hasher(utf8(manifestText)))}\n`;
}
