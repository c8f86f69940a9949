import { readYaml } from "./ecsv-yaml";
import { MAX_COLUMNS } from "./limits";
import type { TableProblem } from "./table";

/** A column as the header declares it. */
export type EcsvColumn = {
  name: string;
  datatype: string;
  subtype: string | null;
  unit: string | null;
  description: string | null;
  ucd: string | null;
};

export type EcsvHeader = {
  delimiter: " " | ",";
  columns: EcsvColumn[];
  /** By name, what several columns are parts of, as astropy's `__serialized_columns__` has it. */
  serialized: ReadonlyMap<string, unknown>;
  /** Where the lines below the header begin. */
  body: { at: number; line: number };
};

/**
 * Reads the comment lines that begin an ECSV file: `%ECSV 1.0`, then YAML.
 *
 * Source: astropy's APE6, https://github.com/astropy/astropy-APEs/blob/main/APE6.rst
 */
export function readEcsvHeader(text: string): EcsvHeader | TableProblem {
  const { lines, body } = commentLines(text);
  const version = /^%ECSV (\d+)\.(\d+)(?:\.\d+)?$/.exec(lines[0]?.trim() ?? "");
  if (version === null) return at(1, "a first line without # %ECSV", "# %ECSV 1.0");
  // Astropy before 4.3 wrote 0.9, which is the same but for what 1.0 has more of.
  if (version[1] !== "1" && version[0] !== "%ECSV 0.9") return at(1, version[0], "%ECSV 1.0");
  const header = readYaml(lines.slice(1).join("\n"), 2);
  if (!(header instanceof Map)) return header;
  const delimiter = header.get("delimiter") ?? " ";
  if (delimiter !== " " && delimiter !== ",") {
    return at(null, `the delimiter ${JSON.stringify(delimiter)}`, "a space or a comma");
  }
  const columns = readColumns(header.get("datatype"));
  if (!Array.isArray(columns)) return columns;
  return { delimiter, columns, serialized: serializedColumns(header.get("meta")), body };
}

function at(line: number | null, found: string, allowed: string): TableProblem {
  return { line, column: null, found, allowed };
}

/** Without their `#` and one space. Blank lines between them are kept, as empty ones. */
function commentLines(text: string): { lines: string[]; body: EcsvHeader["body"] } {
  const lines: string[] = [];
  let from = 0;
  let blank = 0;
  const next = /[ \t]*(?:(#)[ ]?([^\r\n]*))?(?:\r\n|\n|\r|$)/y;
  while (from < text.length) {
    next.lastIndex = from;
    const match = next.exec(text);
    if (match === null) break;
    if (match[1] === undefined) {
      blank += 1;
    } else {
      for (; blank > 0; blank -= 1) lines.push("");
      lines.push(match[2] ?? "");
    }
    from = next.lastIndex;
  }
  return { lines, body: { at: from, line: lines.length + blank + 1 } };
}

function readColumns(datatype: unknown): EcsvColumn[] | TableProblem {
  if (!Array.isArray(datatype) || datatype.length === 0) {
    return at(
      null,
      "a header without a `datatype` list",
      "`datatype`: a name and datatype per column",
    );
  }
  if (datatype.length > MAX_COLUMNS) {
    return at(null, `${datatype.length} columns`, `at most ${MAX_COLUMNS}`);
  }
  const columns: EcsvColumn[] = [];
  for (const [index, given] of (datatype as unknown[]).entries()) {
    const column = given instanceof Map ? readColumn(given) : null;
    if (column === null) {
      const found = `column ${index + 1} of the header without its name or datatype`;
      return at(null, found, "{name: …, datatype: …}");
    }
    if (columns.some(({ name }) => name === column.name)) {
      return at(null, `two columns named ${column.name}`, "one column of each name");
    }
    columns.push(column);
  }
  return columns;
}

function readColumn(given: Map<unknown, unknown>): EcsvColumn | null {
  const name = textOf(given.get("name"));
  const datatype = textOf(given.get("datatype"));
  if (name === null || datatype === null) return null;
  const meta = entries(given.get("meta"));
  return {
    name,
    datatype,
    subtype: textOf(given.get("subtype")),
    unit: textOf(given.get("unit")),
    description: textOf(given.get("description")),
    ucd: textOf(meta.get("ucd")) ?? textOf(meta.get("UCD")),
  };
}

function serializedColumns(meta: unknown): ReadonlyMap<string, unknown> {
  const named = [...entries(entries(meta).get("__serialized_columns__"))];
  return new Map(named.filter((one): one is [string, unknown] => typeof one[0] === "string"));
}

/** A map, or the list of one-entry maps that YAML's `!!omap` is written as. */
function entries(node: unknown): ReadonlyMap<unknown, unknown> {
  if (node instanceof Map) return node;
  if (!Array.isArray(node)) return new Map();
  return new Map(node.flatMap((item: unknown) => (item instanceof Map ? [...item] : [])));
}

function textOf(node: unknown): string | null {
  return typeof node === "string" && node !== "" ? node : null;
}
