import { zipSync } from "fflate";
import { AuditError } from "../audit-error";
import { ZIP_LIMITS } from "./limits";

export type ArchiveFile = { path: string; bytes: Uint8Array };

/**
 * One ZIP of the files, in their order. Time, compression and attributes are fixed, so that the same
 * files give the same bytes.
 *
 * @throws {AuditError} `too-large` past ZIP_LIMITS
 */
export function packFiles(files: readonly ArchiveFile[]): Uint8Array {
  refuseTooLarge(files);
  const packed = zipSync(Object.fromEntries(files.map(({ path, bytes }) => [path, bytes])), {
    level: 6,
    mem: 8,
    // ZIP has no time zone and fflate reads the local one: midnight anywhere is the same bytes.
    mtime: new Date(1980, 0, 1),
  });
  if (packed.length > ZIP_LIMITS.archiveBytes) {
    throw tooLarge(`${packed.length} bytes packed`, ZIP_LIMITS.archiveBytes);
  }
  return packed;
}

function refuseTooLarge(files: readonly ArchiveFile[]): void {
  if (files.length > ZIP_LIMITS.files) {
    throw tooLarge(`${files.length} files`, ZIP_LIMITS.files);
  }
  const largest = files.find(({ bytes }) => bytes.length > ZIP_LIMITS.fileBytes);
  if (largest !== undefined) {
    throw tooLarge(`${largest.path} of ${largest.bytes.length} bytes`, ZIP_LIMITS.fileBytes);
  }
  const total = files.reduce((sum, { bytes }) => sum + bytes.length, 0);
  if (total > ZIP_LIMITS.totalBytes) throw tooLarge(`${total} bytes`, ZIP_LIMITS.totalBytes);
}

function tooLarge(found: string, allowed: number): AuditError {
  return new AuditError("too-large", `found ${found}; an archive holds at most ${allowed}`);
}
