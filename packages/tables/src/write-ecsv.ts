import {
  checkWritten,
  type WrittenCell,
  type WrittenColumn,
  type WrittenTable,
} from "./written-table";

const DATATYPES: Record<WrittenColumn["kind"], string> = {
  text: "string",
  number: "float64",
  integer: "int64",
  boolean: "bool",
  time: "string",
};

/**
 * A table as ECSV 1.0 in commas, so that who leaves out its comment lines reads CSV. Missing cells are
 * empty, and so is a text without letters. Times are astropy's own, in UTC. What astropy itself can't
 * read of a cell: white space at its ends, and in a cell of several lines those that are blank or begin
 * with #.
 *
 * @throws {RangeError} as `checkWritten`
 * Source: astropy's APE6, https://github.com/astropy/astropy-APEs/blob/main/APE6.rst
 */
export function writeEcsv(table: WrittenTable): string {
  checkWritten(table);
  const { columns, rows } = table;
  const header = [
    "%ECSV 1.0",
    "---",
    "delimiter: ','",
    "datatype:",
    ...columns.map(columnLine),
    ...timesMeta(columns.filter(({ kind }) => kind === "time")),
    "schema: astropy-2.0",
  ].map((line) => `# ${line}\n`);
  const alone = columns.length === 1;
  const times = new Set(columns.flatMap(({ kind }, at) => (kind === "time" ? [at] : [])));
  // Astropy's times have their scale in the header, and no Z.
  const inUtc = (cell: WrittenCell, at: number) =>
    times.has(at) && typeof cell === "string" ? cell.slice(0, -1) : cell;
  const lines = [columns.map(({ name }) => name), ...rows.map((row) => row.map(inUtc))].map(
    (row) => `${row.map((cell, at) => cellText(cell, at === 0, alone)).join(",")}\n`,
  );
  return [...header, ...lines].join("");
}

function columnLine({ name, kind, unit, ucd, description }: WrittenColumn): string {
  const parts = [
    `name: ${quoted(name)}`,
    ...(unit === null ? [] : [`unit: ${quoted(unit)}`]),
    `datatype: ${DATATYPES[kind]}`,
    ...(description === null ? [] : [`description: ${quoted(description)}`]),
    ...(ucd === null ? [] : [`meta: {ucd: ${quoted(ucd)}}`]),
  ];
  return `- {${parts.join(", ")}}`;
}

function timesMeta(times: readonly WrittenColumn[]): string[] {
  if (times.length === 0) return [];
  return [
    "meta:",
    "  __serialized_columns__:",
    ...times.flatMap(({ name }) => [
      `    ${quoted(name)}:`,
      "      __class__: astropy.time.core.Time",
      "      format: isot",
      "      in_subfmt: '*'",
      "      out_subfmt: '*'",
      "      precision: 9",
      "      scale: utc",
      `      value: !astropy.table.SerializedColumn {name: ${quoted(name)}}`,
    ]),
  ];
}

/** A JSON string is one of YAML's; beyond ASCII some letters are line breaks to YAML 1.1. */
function quoted(text: string): string {
  return JSON.stringify(text).replaceAll(
    /[\u007f-\u00a0\u2028\u2029\ufeff]/g,
    (letter) => `\\u${letter.charCodeAt(0).toString(16).padStart(4, "0")}`,
  );
}

function cellText(cell: WrittenCell, isFirst: boolean, isAlone: boolean): string {
  if (cell === null || cell === "") return isAlone ? '""' : "";
  if (typeof cell === "boolean") return cell ? "True" : "False";
  if (typeof cell === "number") return String(cell);
  // A line that begins with # is a comment; unquoted white space at a cell's ends is layout.
  const plain = !/[",\r\n]|^\s|\s$/.test(cell) && !(isFirst && cell.startsWith("#"));
  return plain ? cell : `"${cell.replaceAll('"', '""')}"`;
}
