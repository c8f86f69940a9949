import { sameBytes } from "@weighhouse/ledger/bytes";
import type { Files } from "./container";
import { counted } from "./line";
import { WRITER_VERSION } from "../layout";
import type { ArchiveFile } from "../zip/write";

/**
 * Files for readers, written again from the archive's own numbers and compared. What another version
 * of the writer wrote may be worded or drawn otherwise: then it is said that nothing was compared.
 */
export function checkWritten(
  files: Files,
  expected: readonly ArchiveFile[],
  writer: string,
): { faults: string[]; detail: string; compared: boolean } {
  const count = counted(expected.length, "file");
  if (writer !== WRITER_VERSION) {
    const detail = `${count} of writer ${writer}, not compared by this one (${WRITER_VERSION})`;
    return { faults: [], detail, compared: false };
  }
  const faults = expected.flatMap(({ path, bytes }) => {
    const found = files.get(path);
    if (found === undefined) return [`${path} is missing`];
    if (sameBytes(found, bytes)) return [];
    if (found.length > 4 * bytes.length + 4096) {
      return [`${path}: found ${found.length} bytes, written anew ${bytes.length}`];
    }
    return [`${path}${placeOf(found, bytes)}`];
  });
  return { faults, detail: `${count} as written anew`, compared: true };
}

/** The first line that differs, as found. */
function placeOf(found: Uint8Array, expected: Uint8Array): string {
  const decoder = new TextDecoder();
  const [lines, wanted] = [found, expected].map((bytes) => decoder.decode(bytes).split("\n"));
  const at = (wanted ?? []).findIndex((line, index) => line !== lines?.[index]);
  const number = at < 0 ? (wanted ?? []).length + 1 : at + 1;
  const text = lines?.[number - 1] ?? "";
  return `, line ${number}: not what the archive's numbers give: found ${JSON.stringify(text.slice(0, 80))}`;
}
