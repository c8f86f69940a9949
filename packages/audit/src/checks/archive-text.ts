import { jsonText } from "../layout";

/** Why a file can't be used, with its path. */
export type TextFault = { ok: false; fault: string };

/** A file of the archive as text. UTF-8 without a byte order mark, or a fault. */
export function readText(
  files: ReadonlyMap<string, Uint8Array>,
  path: string,
): { ok: true; text: string } | TextFault {
  const bytes = files.get(path);
  if (bytes === undefined) return { ok: false, fault: `${path} is missing` };
  try {
    const text = new TextDecoder("utf-8", { fatal: true, ignoreBOM: true }).decode(bytes);
    return { ok: true, text };
  } catch {
    return { ok: false, fault: `${path} is not UTF-8` };
  }
}

/**
 * The lines of a file in which each line ends in a newline. Read line by line: all of a long ledger
 * is more than one string may hold.
 */
export function readLines(
  files: ReadonlyMap<string, Uint8Array>,
  path: string,
): { ok: true; lines: string[] } | TextFault {
  const bytes = files.get(path);
  if (bytes === undefined) return { ok: false, fault: `${path} is missing` };
  if (bytes.at(-1) !== NEWLINE) return { ok: false, fault: `${path} doesn't end in a newline` };
  const decoder = new TextDecoder("utf-8", { fatal: true, ignoreBOM: true });
  const lines: string[] = [];
  for (let from = 0; from < bytes.length;) {
    const to = bytes.indexOf(NEWLINE, from);
    try {
      lines.push(decoder.decode(bytes.subarray(from, to)));
    } catch {
      return { ok: false, fault: `${path}, line ${lines.length + 1} is not UTF-8` };
    }
    from = to + 1;
  }
  return { ok: true, lines };
}

const NEWLINE = 0x0a;

/**
 * A JSON object of the archive. One form only, as the export writes it: a doubled name, which JSON
 * readers take one way or the other, is another form.
 */
export function readJson(
  files: ReadonlyMap<string, Uint8Array>,
  path: string,
): { ok: true; value: object; text: string } | TextFault {
  const read = readText(files, path);
  if (!read.ok) return read;
  let value: unknown;
  try {
    value = JSON.parse(read.text);
  } catch (error) {
    return { ok: false, fault: `${path} is not JSON: ${(error as Error).message.slice(0, 100)}` };
  }
  if (typeof value !== "object" || value === null || Array.isArray(value)) {
    return { ok: false, fault: `${path} is not a JSON object` };
  }
  const line = firstLineThatDiffers(read.text, jsonText(value));
  if (line !== null) {
    return {
      ok: false,
      fault: `${path}, line ${line}: not in the form that the export writes (members and items a line each, each name once)`,
    };
  }
  return { ok: true, value, text: read.text };
}

function firstLineThatDiffers(found: string, expected: string): number | null {
  if (found === expected) return null;
  const expectedLines = expected.split("\n");
  const foundLines = found.split("\n");
  const at = foundLines.findIndex((line, index) => line !== expectedLines[index]);
  return (at < 0 ? foundLines.length : at) + 1;
}
