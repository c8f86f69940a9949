import type { RawTable } from "./raw-table";
import type { TableProblem } from "./table";
import { VotableDocument, type VoTable } from "./votable-document";
import { columnOf } from "./votable-fields";
import { readXml } from "./votable-xml";

/**
 * Reads a VOTable (versions 1.1 to 1.5) in TABLEDATA, BINARY or BINARY2: the first of its tables that
 * has rows; the others are named in a note. Rows of binary data have their number for a line.
 *
 * Source: IVOA, VOTable Format Definition 1.4, https://www.ivoa.net/documents/VOTable/20191021/
 */
export function readVotable(bytes: Uint8Array): RawTable {
  const document = new VotableDocument();
  const broken = readXml(bytes, document);
  const table = document.chosen ?? document.tables.find(({ fields }) => fields.length > 0) ?? null;
  const problems = [...document.problems, ...(broken === null ? [] : [broken])];
  if (table === null) {
    return unread(problems.length > 0 ? problems : [{ ...NO_TABLE }]);
  }
  problems.push(...fieldProblems(table));
  if (problems.length > 0) return unread(problems);
  return {
    format: "votable",
    columns: table.fields.map((field) => columnOf(field, document.systems)),
    rows: table.rows,
    problems,
    notes: [...document.notes, ...tableNotes(table, document.tables)],
  };
}

const NO_TABLE: TableProblem = {
  line: null,
  column: null,
  found: "no TABLE with a FIELD",
  allowed: "one or more",
};

function unread(problems: TableProblem[]): RawTable {
  return { format: "votable", columns: [], rows: [], problems, notes: [] };
}

function fieldProblems({ fields, rows }: VoTable): TableProblem[] {
  if (fields.length === 0 && rows.length > 0) return [{ ...NO_TABLE }];
  return fields.flatMap(({ name, problem }) =>
    problem === null ? [] : [{ line: null, column: name, ...problem }],
  );
}

function tableNotes(table: VoTable, tables: readonly VoTable[]): string[] {
  const others = tables.filter((other) => other !== table).map(({ name }) => name);
  const arrays = table.fields.filter(({ form }) => form === "array").map(({ name }) => name);
  const singles = table.fields
    .filter(({ datatype }) => datatype === "float")
    .map(({ name }) => name);
  const { declaredRows, rows } = table;
  return [
    ...(others.length > 0 ? [`table ${table.name} was read; not read: ${others.join(", ")}`] : []),
    ...(arrays.length > 0 ? [`several values in a cell, kept as text: ${arrays.join(", ")}`] : []),
    ...(singles.length > 0
      ? [`single precision, with the digits that it has: ${singles.join(", ")}`]
      : []),
    ...(declaredRows !== null && declaredRows !== rows.length
      ? [`the file declares ${declaredRows} rows and has ${rows.length}`]
      : []),
  ];
}
