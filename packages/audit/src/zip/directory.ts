import { AuditError } from "../audit-error";
import { RATIO_FROM_BYTES } from "./limits";
import type { ZipLimits } from "./limits";
import { nameFault } from "./names";

/** One file as the directory declares it, checked against the header before its data. */
export type DirectoryRow = {
  name: string;
  folder: boolean;
  deflated: boolean;
  crc: number;
  packedBytes: number;
  bytes: number;
  dataFrom: number;
};

type CentralRow = Omit<DirectoryRow, "dataFrom"> & { headerAt: number; flags: number };

const END_SIGNATURE = 0x06054b50;
const END_BYTES = 22;
const CENTRAL_SIGNATURE = 0x02014b50;
const CENTRAL_BYTES = 46;
const LOCAL_SIGNATURE = 0x04034b50;
const LOCAL_BYTES = 30;
const DESCRIPTOR_SIGNATURE = 0x08074b50;

const ENCRYPTED = 1 << 0;
const SIZES_FOLLOW = 1 << 3;
const COMPRESSION_HINTS = (1 << 1) | (1 << 2);
const UTF8_NAMES = 1 << 11;

const UNIX = 3;
const FILE_TYPE = 0o170000;
const REGULAR_FILE = 0o100000;
const FOLDER = 0o040000;

/**
 * Reads the directory of a ZIP (PKWARE APPNOTE 4.3) and refuses what a plain archive of a few files
 * has no need of: links, encryption, other methods than stored and deflated, 64-bit sizes, comments,
 * bytes outside of any file, headers that differ from the directory.
 *
 * @throws {AuditError} `not-an-archive` or `too-large`
 */
export function readDirectory(archive: Uint8Array, limits: ZipLimits): DirectoryRow[] {
  if (archive.length > limits.archiveBytes) {
    throw tooLarge(`an archive of ${archive.length} bytes`, limits.archiveBytes);
  }
  const view = new DataView(archive.buffer, archive.byteOffset, archive.byteLength);
  const end = readEnd(view, limits);
  const rows: CentralRow[] = [];
  let at = end.directoryAt;
  for (let row = 0; row < end.files; row += 1) {
    const read = readCentralRow(view, at);
    rows.push(read.row);
    at = read.next;
  }
  if (at !== view.byteLength - END_BYTES)
    throw refusal("the directory", "bytes after its last row");
  refuseDoubledNames(rows);
  refuseTooLarge(rows, limits);
  return placeRows(view, rows, end.directoryAt);
}

function readEnd(view: DataView, limits: ZipLimits): { files: number; directoryAt: number } {
  const at = view.byteLength - END_BYTES;
  // A comment would move the end: not looked for, so none is allowed.
  if (at < 0 || view.getUint32(at, true) !== END_SIGNATURE) {
    throw refusal("the archive", "no end of a ZIP directory in its last 22 bytes");
  }
  const files = view.getUint16(at + 10, true);
  const directoryBytes = view.getUint32(at + 12, true);
  const directoryAt = view.getUint32(at + 16, true);
  if (view.getUint32(at + 4, true) !== 0 || view.getUint16(at + 8, true) !== files) {
    throw refusal("the archive", "a part of several");
  }
  if (view.getUint16(at + 20, true) !== 0) throw refusal("the archive", "a comment");
  if (directoryAt + directoryBytes !== at) {
    throw refusal("the archive", "bytes between the directory and its end, or 64-bit sizes");
  }
  if (files > limits.files) throw tooLarge(`${files} files`, limits.files);
  return { files, directoryAt };
}

function readCentralRow(view: DataView, at: number): { row: CentralRow; next: number } {
  const limit = view.byteLength - END_BYTES;
  if (at + CENTRAL_BYTES > limit || view.getUint32(at, true) !== CENTRAL_SIGNATURE) {
    throw refusal("the directory", `no row at byte ${at}`);
  }
  const nameBytes = view.getUint16(at + 28, true);
  const extraBytes = view.getUint16(at + 30, true);
  const commentBytes = view.getUint16(at + 32, true);
  const next = at + CENTRAL_BYTES + nameBytes + extraBytes + commentBytes;
  if (next > limit) throw refusal("the directory", `a row at byte ${at} that runs past its end`);
  const name = readName(view, at + CENTRAL_BYTES, nameBytes);
  const folder = name.endsWith("/");
  const row = {
    name,
    folder,
    flags: view.getUint16(at + 8, true),
    deflated: isDeflated(name, view.getUint16(at + 10, true)),
    crc: view.getUint32(at + 16, true),
    packedBytes: view.getUint32(at + 20, true),
    bytes: view.getUint32(at + 24, true),
    headerAt: view.getUint32(at + 42, true),
  };
  const fault = nameFault(folder ? name.slice(0, -1) : name);
  if (fault !== null) throw refusal(JSON.stringify(name), `a name that is not allowed: ${fault}`);
  refuseStrangeKinds(view, at, row);
  return { row, next };
}

function refuseStrangeKinds(view: DataView, at: number, row: CentralRow): void {
  if (row.flags & ENCRYPTED) throw refusal(row.name, "encryption");
  if (row.flags & ~(SIZES_FOLLOW | COMPRESSION_HINTS | UTF8_NAMES)) {
    throw refusal(row.name, `flags ${row.flags}`);
  }
  if (row.folder && (row.bytes !== 0 || row.packedBytes > 2)) {
    throw refusal(row.name, "a folder with content");
  }
  const madeBy = view.getUint8(at + 5);
  const type = (view.getUint32(at + 38, true) >>> 16) & FILE_TYPE;
  const plain = row.folder ? FOLDER : REGULAR_FILE;
  if (madeBy === UNIX && type !== 0 && type !== plain) {
    throw refusal(row.name, type === 0o120000 ? "a symbolic link" : "a special file");
  }
}

function refuseDoubledNames(rows: CentralRow[]): void {
  const seen = new Set<string>();
  for (const { name } of rows) {
    // Many file systems take A and a for one name.
    const folded = name.toLowerCase();
    if (seen.has(folded)) throw refusal(name, "the name twice");
    seen.add(folded);
  }
}

function refuseTooLarge(rows: CentralRow[], limits: ZipLimits): void {
  let total = 0;
  for (const { name, bytes, packedBytes } of rows) {
    if (bytes > limits.fileBytes) throw tooLarge(`${name} of ${bytes} bytes`, limits.fileBytes);
    if (bytes >= RATIO_FROM_BYTES && bytes > packedBytes * limits.ratio) {
      throw tooLarge(`${name}, packed ${bytes} to ${packedBytes} bytes`, `${limits.ratio} to 1`);
    }
    total += bytes;
  }
  if (total > limits.totalBytes) throw tooLarge(`${total} bytes unpacked`, limits.totalBytes);
}

/** Finds each file's data, and insists that headers and data fill the archive up to the directory. */
function placeRows(view: DataView, rows: CentralRow[], directoryAt: number): DirectoryRow[] {
  let at = 0;
  const placed = new Map<CentralRow, number>();
  for (const row of [...rows].sort((a, b) => a.headerAt - b.headerAt)) {
    if (row.headerAt !== at) throw refusal(row.name, "bytes outside of any file, or shared ones");
    const dataFrom = checkHeader(view, row, directoryAt);
    placed.set(row, dataFrom);
    at = dataFrom + row.packedBytes + descriptorBytes(view, row, dataFrom, directoryAt);
    if (at > directoryAt) throw refusal(row.name, "data that runs into the directory");
  }
  if (at !== directoryAt) throw refusal("the archive", "bytes before its directory");
  return rows.map(({ headerAt: _at, flags: _flags, ...row }, index) => ({
    ...row,
    dataFrom: placed.get(rows[index] as CentralRow) as number,
  }));
}

function checkHeader(view: DataView, row: CentralRow, directoryAt: number): number {
  const at = row.headerAt;
  if (at + LOCAL_BYTES > directoryAt || view.getUint32(at, true) !== LOCAL_SIGNATURE) {
    throw refusal(row.name, `no header at byte ${at}`);
  }
  const nameBytes = view.getUint16(at + 26, true);
  const dataFrom = at + LOCAL_BYTES + nameBytes + view.getUint16(at + 28, true);
  if (dataFrom > directoryAt) throw refusal(row.name, "a header that runs into the directory");
  const sizesFollow = (row.flags & SIZES_FOLLOW) !== 0;
  const said = [14, 18, 22].map((offset) => view.getUint32(at + offset, true));
  const declared = [row.crc, row.packedBytes, row.bytes];
  const agrees =
    readName(view, at + LOCAL_BYTES, nameBytes) === row.name &&
    view.getUint16(at + 6, true) === row.flags &&
    isDeflated(row.name, view.getUint16(at + 8, true)) === row.deflated &&
    said.every((value, index) => value === declared[index] || (sizesFollow && value === 0));
  if (!agrees) throw refusal(row.name, "a header that differs from the directory");
  return dataFrom;
}

/** Sizes written behind the data, by programs that pack a stream, must be the directory's as well. */
function descriptorBytes(
  view: DataView,
  row: CentralRow,
  dataFrom: number,
  directoryAt: number,
): number {
  if ((row.flags & SIZES_FOLLOW) === 0) return 0;
  const at = dataFrom + row.packedBytes;
  if (at + 16 > directoryAt) throw refusal(row.name, "data that runs into the directory");
  const signature = view.getUint32(at, true) === DESCRIPTOR_SIGNATURE ? 4 : 0;
  const said = [0, 4, 8].map((offset) => view.getUint32(at + signature + offset, true));
  if (said[0] !== row.crc || said[1] !== row.packedBytes || said[2] !== row.bytes) {
    throw refusal(row.name, "sizes behind the data that differ from the directory");
  }
  return signature + 12;
}

function isDeflated(name: string, method: number): boolean {
  if (method !== 0 && method !== 8) {
    throw refusal(name, `compression method ${method}; stored and deflated are allowed`);
  }
  return method === 8;
}

function readName(view: DataView, at: number, length: number): string {
  const bytes = new Uint8Array(view.buffer, view.byteOffset + at, length);
  // Names past ASCII are refused afterwards, so each byte is one character here.
  return String.fromCharCode(...bytes.subarray(0, 1000));
}

function refusal(where: string, found: string): AuditError {
  return new AuditError("not-an-archive", `${where}: found ${found}`);
}

function tooLarge(found: string, allowed: number | string): AuditError {
  return new AuditError("too-large", `found ${found}; allowed is at most ${allowed}`);
}
