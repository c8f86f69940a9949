import { deflateSync } from "fflate";
import { crc32 } from "../zip/crc32";

export type Row = {
  name: string;
  content?: Uint8Array;
  deflate?: boolean;
  method?: number;
  flags?: number;
  unix?: number;
  crc?: number;
  /** Declared size. */
  bytes?: number;
  headerName?: string;
  headerBytes?: number;
  headerAt?: number;
  sizesFollow?: boolean;
  descriptorBytes?: number;
};

/** A ZIP written field by field (PKWARE APPNOTE 4.3), so that each field can lie. */
export function zipOf(rows: Row[]): Uint8Array {
  const parts: Uint8Array[] = [];
  const central: Uint8Array[] = [];
  let offset = 0;
  for (const row of rows) {
    const content = row.content ?? new Uint8Array(0);
    const data = row.deflate ? deflateSync(content) : content;
    const method = row.method ?? (row.deflate ? 8 : 0);
    const flags = (row.flags ?? 0) | (row.sizesFollow ? 8 : 0);
    const crc = row.crc ?? crc32(content);
    const size = row.bytes ?? content.length;
    const said = row.sizesFollow ? [0, 0, 0] : [crc, data.length, row.headerBytes ?? size];
    const headerName = text(row.headerName ?? row.name);
    const name = text(row.name);
    const local = concat(
      u32(0x04034b50),
      u16(20),
      u16(flags),
      u16(method),
      u32(0),
      ...said.map(u32),
      u16(headerName.length),
      u16(0),
      headerName,
      data,
      ...(row.sizesFollow
        ? [u32(0x08074b50), u32(crc), u32(data.length), u32(row.descriptorBytes ?? size)]
        : []),
    );
    central.push(
      concat(
        u32(0x02014b50),
        u16(row.unix === undefined ? 20 : (3 << 8) | 20),
        u16(20),
        u16(flags),
        u16(method),
        u32(0),
        u32(crc),
        u32(data.length),
        u32(size),
        u16(name.length),
        u16(0),
        u16(0),
        u16(0),
        u16(0),
        u32((row.unix ?? 0) * 65536),
        u32(row.headerAt ?? offset),
        name,
      ),
    );
    parts.push(local);
    offset += local.length;
  }
  const directory = concat(...central);
  return concat(
    ...parts,
    directory,
    u32(0x06054b50),
    u32(0),
    u16(rows.length),
    u16(rows.length),
    u32(directory.length),
    u32(offset),
    u16(0),
  );
}

function u16(value: number): Uint8Array {
  return Uint8Array.of(value & 255, (value >> 8) & 255);
}

function u32(value: number): Uint8Array {
  return concat(u16(value % 65536), u16(Math.floor(value / 65536)));
}

export function concat(...parts: Uint8Array[]): Uint8Array {
  return new Uint8Array(parts.flatMap((part) => [...part]));
}

function text(characters: string): Uint8Array {
  return new TextEncoder().encode(characters);
}
