import { ecsvType, type EcsvType } from "./ecsv-cells";
import { readEcsvHeader, type EcsvColumn, type EcsvHeader } from "./ecsv-header";
import { joinParts, type EcsvSource } from "./ecsv-parts";
import { ecsvRecords, type EcsvRecord } from "./ecsv-records";
import { plainColumn, type RawCell, type RawRow, type RawTable } from "./raw-table";
import type { RowProblem, TableProblem } from "./table";
import { addProblem } from "./row-limit";
import { refusedText } from "./text";

/**
 * Reads ECSV 1.0, astropy's CSV with a YAML header. A cell is what its column's datatype says or its
 * row's problem; an empty one is missing, as is a NaN, said so.
 *
 * Source: astropy's APE6, https://github.com/astropy/astropy-APEs/blob/main/APE6.rst
 */
export function readEcsv(text: string): RawTable {
  const bare = text.startsWith("\ufeff") ? text.slice(1) : text;
  const refused = refusedText(bare);
  if (refused !== null) return unread([refused]);
  const header = readEcsvHeader(bare);
  if (!("columns" in header)) return unread([header]);
  const types = header.columns.map(ecsvType);
  const problems = types.flatMap((type) => ("found" in type ? [{ line: null, ...type }] : []));
  if (problems.length > 0) return unread(problems);
  return readBody(bare, header, types as EcsvType[]);
}

function unread(problems: TableProblem[]): RawTable {
  return { format: "ecsv", columns: [], rows: [], problems, notes: [] };
}

function readBody(text: string, header: EcsvHeader, types: readonly EcsvType[]): RawTable {
  const columns = header.columns.map((column, index) => ({
    ...plainColumn(column.name),
    unit: column.unit,
    ucd: column.ucd,
    description: column.description,
    kind: types[index]?.kind ?? null,
  }));
  const { sources, notes, problems } = joinParts(columns, header.serialized);
  const { records, comments, problem } = ecsvRecords(text, header.body, {
    delimiter: header.delimiter,
    columns: columns.length,
  });
  const faults = [...problems, ...namesProblem(records[0], header), ...(problem ? [problem] : [])];
  if (faults.length > 0) return unread(faults);
  const cells = new CellReader(header.columns, types);
  const rows = records.slice(1).map((record) => cells.row(record, sources));
  return {
    format: "ecsv",
    columns: sources.map(({ column }) => column),
    rows,
    problems: [],
    notes: [
      ...types.flatMap(({ note }) => note ?? []),
      ...notes,
      ...cells.notes(),
      ...(/[\r\n]$/.test(text) ? [] : ["the last line isn't ended: the file may be cut off"]),
      ...(comments > 0
        ? [`${comments} comment ${comments === 1 ? "line" : "lines"} among the rows left out`]
        : []),
    ],
  };
}

function namesProblem(names: EcsvRecord | undefined, header: EcsvHeader): TableProblem[] {
  if (names === undefined) {
    const allowed = "a line of column names below the header";
    return [{ line: header.body.line, column: null, found: "the end of the file", allowed }];
  }
  const declared = header.columns.map(({ name }) => name);
  const index = declared.findIndex((name, at) => names.cells[at] !== name);
  const at = index === -1 && names.cells.length > declared.length ? declared.length : index;
  if (at === -1) return [];
  const found =
    names.cells[at] === undefined ? "no name" : `the name ${names.cells[at].slice(0, 80)}`;
  const allowed = declared[at] ?? "no more columns than the header declares";
  return [{ line: names.line, column: null, found: `${found} of column ${at + 1}`, allowed }];
}

class CellReader {
  readonly #columns: readonly EcsvColumn[];
  readonly #types: readonly EcsvType[];
  readonly #notNumbers: number[];

  constructor(columns: readonly EcsvColumn[], types: readonly EcsvType[]) {
    this.#columns = columns;
    this.#types = types;
    this.#notNumbers = columns.map(() => 0);
  }

  row({ line, cells }: EcsvRecord, sources: readonly EcsvSource[]): RawRow {
    const expected = this.#columns.length;
    if (cells.length !== expected) {
      const found = `${cells.length} ${cells.length === 1 ? "cell" : "cells"}`;
      const problem = { column: null, found, allowed: `${expected}, as in the header` };
      return { line, cells: sources.map(() => null), problems: [problem] };
    }
    const problems: RowProblem[] = [];
    const read = cells.map((text, index) => this.#cell(text, index, problems));
    const row = { line, cells: sources.map(({ cell }) => cell(read)) };
    return problems.length === 0 ? row : { ...row, problems };
  }

  #cell(text: string, index: number, problems: RowProblem[]): RawCell {
    if (text === "") return null;
    const { kind, read, allowed } = this.#types[index] as EcsvType;
    const cell = read(kind === "text" ? text : text.trim());
    if (cell === undefined) {
      const column = this.#columns[index]?.name ?? null;
      addProblem(problems, { column, found: text.slice(0, 80), allowed });
      return null;
    }
    if (!Number.isNaN(cell)) return cell;
    this.#notNumbers[index] = (this.#notNumbers[index] ?? 0) + 1;
    return null;
  }

  notes(): string[] {
    return this.#notNumbers.flatMap((count, index) =>
      count === 0 ? [] : [`column ${this.#columns[index]?.name}: ${count} NaN, taken as missing`],
    );
  }
}
