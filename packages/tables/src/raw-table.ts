import type { MeasurementDraft, RowProblem, TableProblem } from "./table";

/** Null: masked or missing. A number that a double can't hold exactly stays text. */
export type RawCell = string | number | boolean | null;

/** A column as the file declares it; null where it says nothing. */
export type RawColumn = {
  name: string;
  unit: string | null;
  /** IVOA UCD1+, as `phot.flux;em.opt`. */
  ucd: string | null;
  description: string | null;
  kind: "text" | "number" | "boolean" | "time" | null;
  /** In lower case: `utc`, `tt`, `tai`, `tdb`; others are told and refused once the column is used. */
  timeScale: string | null;
  /** In lower case: `iso`, `jd`, `mjd`; others are told and refused once the column is used. */
  timeFormat: string | null;
  /** A Julian Date to be added to the column's days, as VOTable's `timeorigin` gives it. */
  timeOrigin: number | null;
  /** Where the time was counted, in lower case: `topocenter`, `barycenter`, … */
  timeReference: string | null;
};

/** As many cells as there are columns. */
export type RawRow = {
  /** The row's first line in the text, from 1; a binary table's row number, from 1. */
  line: number;
  cells: RawCell[];
  /** What is wrong with the row itself, as too few cells: it makes no draft. */
  problems?: RowProblem[];
};

/** A table as it was read, before its columns are matched to a measurement's fields. */
export type RawTable = {
  format: "csv" | "ecsv" | "votable";
  columns: RawColumn[];
  rows: RawRow[];
  /** What makes the file, or a part of it, unreadable. With any, nothing of it may be used. */
  problems: TableProblem[];
  /** What was taken for what, in a sentence each. */
  notes: string[];
};

/** A row as a draft of a measurement, or why it isn't one. */
export type DraftRow = {
  line: number;
  /** Null where the row is refused. */
  draft: MeasurementDraft | null;
  problems: RowProblem[];
  /** What was converted or filled in for this row. */
  notes: string[];
};

/** A file whose rows are drafts already: a measurement's fields under their own names. */
export type DraftTable = {
  format: "ndjson" | "document";
  columns: RawColumn[];
  rows: DraftRow[];
  problems: TableProblem[];
  notes: string[];
};

/** A column of which nothing but its name is known. */
export function plainColumn(name: string): RawColumn {
  return {
    name,
    unit: null,
    ucd: null,
    description: null,
    kind: null,
    timeScale: null,
    timeFormat: null,
    timeOrigin: null,
    timeReference: null,
  };
}
