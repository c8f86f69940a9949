/** Fields of a ZIP's rows (PKWARE APPNOTE 4.3.7, 4.3.12, 4.3.16): their offsets and sizes. */
type Field = [name: string, offset: number, bytes: number];

const LOCAL: Field[] = [
  ["signature", 0, 4],
  ["version needed", 4, 2],
  ["flags", 6, 2],
  ["method", 8, 2],
  ["time", 10, 2],
  ["date", 12, 2],
  ["checksum", 14, 4],
  ["packed size", 18, 4],
  ["size", 22, 4],
  ["name length", 26, 2],
  ["extra length", 28, 2],
];
const CENTRAL: Field[] = [
  ["signature", 0, 4],
  ["version made by", 4, 1],
  ["system made on", 5, 1],
  ["version needed", 6, 2],
  ["flags", 8, 2],
  ["method", 10, 2],
  ["time", 12, 2],
  ["date", 14, 2],
  ["checksum", 16, 4],
  ["packed size", 20, 4],
  ["size", 24, 4],
  ["name length", 28, 2],
  ["extra length", 30, 2],
  ["comment length", 32, 2],
  ["disk", 34, 2],
  ["internal attributes", 36, 2],
  ["external attributes", 38, 4],
  ["header's place", 42, 4],
];

/** What each byte of an archive is, as written by `packFiles`: no descriptors, extras, comments. */
export function fieldsOf(archive: Uint8Array): string[] {
  const view = new DataView(archive.buffer, archive.byteOffset, archive.byteLength);
  const names = Array.from({ length: archive.length }, () => "end of the directory");
  const name = (from: number, bytes: number, what: string) => {
    for (let at = from; at < from + bytes; at += 1) names[at] = what;
  };
  const row = (at: number, kind: string, fields: Field[]) => {
    for (const [what, offset, bytes] of fields) name(at + offset, bytes, `${kind}: ${what}`);
  };
  let at = 0;
  while (view.getUint32(at, true) === 0x04034b50) {
    const [packed, length] = [view.getUint32(at + 18, true), view.getUint16(at + 26, true)];
    row(at, "header", LOCAL);
    name(at + 30, length, "header: name");
    name(at + 30 + length, packed, "content");
    // What follows the stream's last code up to the byte's end is in nobody's hands.
    name(at + 30 + length + packed - 1, 1, "content: last byte");
    at += 30 + length + packed;
  }
  while (view.getUint32(at, true) === 0x02014b50) {
    const length = view.getUint16(at + 28, true);
    row(at, "directory", CENTRAL);
    name(at + 46, length, "directory: name");
    at += 46 + length;
  }
  return names;
}

/**
 * The only bytes that may change unnoticed. Each says something about a file that is not the file:
 * when it was packed and by what, how hard the packer tried, what it would like its permissions to be.
 * A packed stream has other packings of the same bytes (of a run of dashes, a copy from one or from two
 * back), and its last byte ends in up to seven bits that no decoder reads.
 */
export const WITHOUT_CONTENT = new Set([
  "header: version needed",
  "header: time",
  "header: date",
  "directory: version made by",
  "directory: system made on",
  "directory: version needed",
  "directory: time",
  "directory: date",
  "directory: disk",
  "directory: internal attributes",
  "directory: external attributes",
  "content",
  "content: last byte",
]);
