import { ByteWriter } from "./byte-writer";
import { writeBase64 } from "./votable-base64";
import {
  checkWritten,
  type WrittenCell,
  type WrittenColumn,
  type WrittenTable,
} from "./written-table";

export type VotableOptions = { serialization: "TABLEDATA" | "BINARY2" };

const TYPES: Record<WrittenColumn["kind"], string> = {
  text: 'datatype="unicodeChar" arraysize="*"',
  number: 'datatype="double"',
  integer: 'datatype="long"',
  boolean: 'datatype="boolean"',
  time: 'datatype="unicodeChar" arraysize="*" xtype="timestamp" ref="utc"',
};

/**
 * A table as VOTable 1.4. Missing cells are empty in TABLEDATA and flagged in BINARY2, and a text
 * without letters is missing. In TABLEDATA white space at a text's ends is layout, and the control
 * characters that XML 1.0 can't hold are U+FFFD; BINARY2 keeps both. Times are in UTC; where they
 * were counted isn't told.
 *
 * @throws {RangeError} as `checkWritten`
 * Source: IVOA, VOTable Format Definition 1.4, https://www.ivoa.net/documents/VOTable/20191021/
 */
export function writeVotable(table: WrittenTable, { serialization }: VotableOptions): string {
  checkWritten(table);
  const { columns, rows } = table;
  const hasTimes = columns.some(({ kind }) => kind === "time");
  return [
    '<?xml version="1.0" encoding="UTF-8"?>',
    '<VOTABLE version="1.4" xmlns="http://www.ivoa.net/xml/VOTable/v1.3">',
    '<RESOURCE type="results">',
    ...(hasTimes ? ['<TIMESYS ID="utc" timescale="UTC" refposition="UNKNOWN"/>'] : []),
    `<TABLE name="measurements" nrows="${rows.length}">`,
    ...columns.map(field),
    "<DATA>",
    serialization === "TABLEDATA" ? tabledata(table) : binary2(table),
    "</DATA>",
    "</TABLE>",
    "</RESOURCE>",
    "</VOTABLE>",
    "",
  ].join("\n");
}

function field({ name, kind, unit, ucd, description }: WrittenColumn): string {
  const attributes = [
    `name="${escaped(name)}"`,
    TYPES[kind],
    ...(unit === null ? [] : [`unit="${escaped(unit)}"`]),
    ...(ucd === null ? [] : [`ucd="${escaped(ucd)}"`]),
  ].join(" ");
  if (description === null) return `<FIELD ${attributes}/>`;
  return `<FIELD ${attributes}><DESCRIPTION>${escaped(description)}</DESCRIPTION></FIELD>`;
}

function tabledata({ columns, rows }: WrittenTable): string {
  const lines = rows.map((row) => {
    const cells = row.map((cell, at) => {
      const text = cellText(cell, columns[at]?.kind === "time");
      return text === "" ? "<TD/>" : `<TD>${escaped(text)}</TD>`;
    });
    return `<TR>${cells.join("")}</TR>`;
  });
  return ["<TABLEDATA>", ...lines, "</TABLEDATA>"].join("\n");
}

function cellText(cell: WrittenCell, isTime: boolean): string {
  if (cell === null) return "";
  if (typeof cell === "boolean") return cell ? "T" : "F";
  return isTime ? String(cell).slice(0, -1) : String(cell);
}

/** XML's letters with a meaning, those that it would read as others, and those that it can't hold. */
function escaped(text: string): string {
  return text
    .replaceAll(/[^\t\n\r -\ud7ff\ue000-\ufffd\u{10000}-\u{10ffff}]/gu, "\ufffd")
    .replaceAll(/[&<>"\t\r\n]/g, (letter) => ENTITIES[letter] ?? letter);
}

const ENTITIES: Record<string, string> = {
  "&": "&amp;",
  "<": "&lt;",
  ">": "&gt;",
  '"': "&quot;",
  "\t": "&#9;",
  "\r": "&#13;",
  "\n": "&#10;",
};

function binary2({ columns, rows }: WrittenTable): string {
  const writer = new ByteWriter();
  for (const row of rows) {
    const missing = row.map((cell) => cell === null || cell === "");
    for (let at = 0; at < columns.length; at += 8) {
      const flags = missing.slice(at, at + 8);
      writer.byte(flags.reduce((byte, flag, bit) => (flag ? byte | (0x80 >> bit) : byte), 0));
    }
    for (const [at, { kind }] of columns.entries()) writeCell(writer, kind, row[at] ?? null);
  }
  const base64 = writeBase64(writer.bytes);
  return `<BINARY2>\n<STREAM encoding="base64">\n${base64}\n</STREAM>\n</BINARY2>`;
}

/** A missing value is there all the same: NaN, 0, the boolean's own mark or no letters. */
function writeCell(writer: ByteWriter, kind: WrittenColumn["kind"], cell: WrittenCell): void {
  switch (kind) {
    case "number":
      writer.double(typeof cell === "number" ? cell : Number.NaN);
      break;
    case "integer":
      writer.long(typeof cell === "number" ? BigInt(cell) : 0n);
      break;
    case "boolean":
      writer.byte((cell === null ? "?" : cell === true ? "T" : "F").charCodeAt(0));
      break;
    default: {
      const text = cellText(cell, kind === "time").replaceAll(/\p{Cs}/gu, "\ufffd");
      writer.int(text.length);
      writer.utf16(text);
    }
  }
}
