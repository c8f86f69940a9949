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
    if (to === from) return { ok: false, fault: `${path}, line ${lines.length + 1} is empty` };
    if (lines.length === MOST_LINES) {
      return { ok: false, fault: `${path}: found more than ${MOST_LINES} lines` };
    }
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
/** A file of 256 MiB could hold a line in two bytes, each a string of its own in memory. */
const MOST_LINES = 4_000_000;
/** Deepest JSON of an archive; documents of every form stay below 12. */
const MOST_DEEP = 64;
/** Of a JSON file, unless its size is known beforehand: parsed, it takes some ten times as much. */
const MOST_JSON_BYTES = 64 * 2 ** 20;

/**
 * A JSON object of the archive. One form only, as the export writes it: a doubled name, which JSON
 * readers take one way or the other, is another form.
 */
export function readJson(
  files: ReadonlyMap<string, Uint8Array>,
  path: string,
  mostBytes = MOST_JSON_BYTES,
): { ok: true; value: object; text: string } | TextFault {
  const bytes = files.get(path)?.length ?? 0;
  if (bytes > mostBytes) {
    return { ok: false, fault: `${path}: found ${bytes} bytes; allowed are ${mostBytes}` };
  }
  const read = readText(files, path);
  if (!read.ok) return read;
  if (isDeeperThan(read.text, MOST_DEEP)) {
    return { ok: false, fault: `${path}: found JSON nested more than ${MOST_DEEP} deep` };
  }
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

/** Looked for before parsing, and in texts that may be no JSON at all. */
function isDeeperThan(text: string, most: number): boolean {
  let depth = 0;
  let quoted = false;
  for (let at = 0; at < text.length; at += 1) {
    const code = text.charCodeAt(at);
    if (code === 0x22) quoted = !quoted;
    else if (code === 0x5c) at += quoted ? 1 : 0;
    else if (quoted) continue;
    else if (code === 0x5b || code === 0x7b) depth += 1;
    else if (code === 0x5d || code === 0x7d) depth -= 1;
    if (depth > most) return true;
  }
  return false;
}

function firstLineThatDiffers(found: string, expected: string): number | null {
  if (found === expected) return null;
  const expectedLines = expected.split("\n");
  const foundLines = found.split("\n");
  const at = foundLines.findIndex((line, index) => line !== expectedLines[index]);
  return (at < 0 ? foundLines.length : at) + 1;
}
