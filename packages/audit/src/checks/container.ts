import { AuditError } from "../audit-error";
import { counted, failed, ok } from "./line";
import type { Checked } from "./line";
import { unpackFiles } from "../zip/read";
import type { ZipLimits } from "../zip/limits";

export type Files = ReadonlyMap<string, Uint8Array>;

/** The ZIP itself: paths, names, sizes, links, bytes that belong to no file. */
export function checkContainer(archive: Uint8Array, limits: ZipLimits): Checked<Files> {
  try {
    const files = unpackFiles(archive, limits);
    const bytes = [...files.values()].reduce((sum, file) => sum + file.length, 0);
    return {
      line: ok("container", `${counted(files.size, "file")}, ${bytes} bytes unpacked`),
      value: files,
    };
  } catch (error) {
    if (!(error instanceof AuditError)) throw error;
    return { line: failed("container", error.message), value: null };
  }
}
