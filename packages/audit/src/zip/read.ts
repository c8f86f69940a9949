import { inflateSync } from "fflate";
import { AuditError } from "../audit-error";
import { crc32 } from "./crc32";
import { readDirectory } from "./directory";
import type { DirectoryRow } from "./directory";
import { ZIP_LIMITS } from "./limits";
import type { ZipLimits } from "./limits";

/**
 * The files of a ZIP, by path.
 *
 * The archive is hostile until proven otherwise. Its directory and its files must tell the same
 * story, without a byte left over, so that no two programs unpack different things from it; nothing
 * is inflated before its declared size is within the limits.
 *
 * @throws {AuditError} `not-an-archive` or `too-large`, naming the file
 */
export function unpackFiles(
  archive: Uint8Array,
  limits: ZipLimits = ZIP_LIMITS,
): Map<string, Uint8Array> {
  const files = new Map<string, Uint8Array>();
  for (const row of readDirectory(archive, limits)) {
    // A folder's own entry, as other programs write them, holds nothing.
    if (!row.folder) files.set(row.name, unpack(archive, row));
  }
  return files;
}

function unpack(archive: Uint8Array, row: DirectoryRow): Uint8Array {
  const packed = archive.subarray(row.dataFrom, row.dataFrom + row.packedBytes);
  const bytes = row.deflated ? inflate(packed, row) : packed;
  if (bytes.length !== row.bytes) {
    throw refusal(row.name, `${bytes.length} bytes where ${row.bytes} are declared`);
  }
  if (crc32(bytes) !== row.crc) throw refusal(row.name, "bytes that differ from their checksum");
  return bytes;
}

function inflate(packed: Uint8Array, row: DirectoryRow): Uint8Array {
  try {
    // One byte more than declared: longer content shows itself instead of being cut off.
    return inflateSync(packed, { out: new Uint8Array(row.bytes + 1) });
  } catch (cause) {
    throw refusal(row.name, "compressed bytes that don't unpack", cause);
  }
}

function refusal(name: string, found: string, cause?: unknown): AuditError {
  return new AuditError("not-an-archive", `${name}: found ${found}`, { cause });
}
