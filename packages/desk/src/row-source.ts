import type { CampaignDocument } from "@weighhouse/campaign/document";
import { below } from "@weighhouse/campaign/pointer";
import type { Problem } from "@weighhouse/campaign/problem";
import type { JudgedRow } from "./judge-row";
import type { ReadRows, RowProblem } from "./read-rows";
import type { Piece } from "./stage-lines";

/** Where a row's fault, or one of the text as a whole, lies in what was sent. */
export type Place = {
  row(problem: RowProblem, line: number): Problem;
  text(problem: RowProblem, line: number | null): Problem;
};

/** What rows without a field of their own have. */
export type RowDefaults = Partial<Record<"measurand" | "facility" | "team" | "batch", string>>;

/** Rows that come in pieces, once the campaign's declarations are known. */
export type RowSource = (document: CampaignDocument) => {
  pieces: AsyncIterable<Piece>;
  columns: ReadRows["columns"];
  problems: ReadRows["problems"];
  place: Place;
};

/** Rows that are there already, as one piece. */
export function piecesOf(rows: Piece["rows"], bytes: number): AsyncIterable<Piece> {
  return {
    async *[Symbol.asyncIterator]() {
      yield { rows, bytes };
    },
  };
}

/** Of a text whose lines are rows, the line and the column stand in words. */
export function inText(pointer: string): Place {
  const place = ({ column, found, allowed }: RowProblem, line: number | null): Problem => {
    const words = [line === null ? "" : `line ${line}`, column === null ? "" : `column ${column}`];
    const where = words.filter((word) => word !== "").join(", ");
    return { pointer, code: "bad-format", found: where ? `${found} (${where})` : found, allowed };
  };
  return { row: place, text: place };
}

/** Of a part of an upload, of which there are several. */
export function inPart(part: number): Place {
  const place = ({ column, ...problem }: RowProblem, line: number | null): Problem => {
    const words = [`part ${part}`, line === null ? "" : `line ${line}`];
    if (column !== null) words.push(`column ${column}`);
    const where = words.filter((word) => word !== "").join(", ");
    return { pointer: "", code: "bad-format", ...problem, found: `${problem.found} (${where})` };
  };
  return { row: place, text: place };
}

/** Of a list of drafts, at its pointer. */
export function inDrafts(pointer: string): Place {
  const ofText = inText(pointer).text;
  return { text: ofText, row: (problem, line) => atField(problem, below(pointer, line - 1)) };
}

/** Of the one draft that is the whole. */
export function inDraft(): Place {
  return { text: inText("").text, row: (problem) => atField(problem, "") };
}

function atField({ column, found, allowed }: RowProblem, row: string): Problem {
  const pointer = column === null ? row : below(row, ...column.split("."));
  return { pointer, code: "bad-format", found, allowed };
}

/** Rows with what their fields leave open filled in. */
export function withDefaults(rows: Piece["rows"], defaults: RowDefaults): Piece["rows"] {
  const given = Object.entries(defaults);
  if (given.length === 0) return rows;
  return rows.map((row) => {
    if (row.draft === null) return row;
    if (row.measurement !== undefined) {
      const measurement = { ...row.measurement };
      for (const [field, value] of given) measurement[field as keyof RowDefaults] ??= value;
      return { ...row, draft: measurement, measurement };
    }
    const draft = { ...row.draft };
    for (const [field, value] of given) {
      // A row that names its observable falls in a measurand of that one.
      if (field !== "measurand" || (draft["observable"] ?? null) === null) draft[field] ??= value;
    }
    return { ...row, draft };
  });
}

/** Problems by the columns' own names, where a field was read from a column. */
export function inColumns(row: JudgedRow, columns: ReadRows["columns"]): JudgedRow {
  if (columns.length === 0 || row.problems.length === 0) return row;
  const names = new Map(columns.map(({ column, field }) => [field, column]));
  const named = row.problems.map((problem) => ({
    ...problem,
    column: names.get(problem.column) ?? problem.column,
  }));
  return { ...row, problems: named };
}
