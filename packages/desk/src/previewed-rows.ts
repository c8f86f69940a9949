import type { TableColumn, TableProblem } from "@weighhouse/tables/table";
import type { JudgedRow } from "./judge-rows";
import type { StandingsChanges } from "./standings-changes";

export type PreviewedRows = {
  /** The ledger's size that this was found at. */
  size: number;
  /** The file's columns in order, and the field that each is read as; null: kept in `extra`. */
  columns: TableColumn[];
  counts: Record<JudgedRow["fate"], number>;
  /** What is wrong with the text as a whole, or with its rows taken together. */
  problems: TableProblem[];
  /** Whether posting would be taken: nothing refused, nothing in conflict, something new. */
  postable: boolean;
  /** What posting would change; null where it would not be taken. */
  changes: StandingsChanges | null;
};

/** A row as it is told: its measurement only where the rows are few enough to be held together. */
export type PreviewedRow = JudgedRow & {
  /** Of an upload, from 1. */
  part?: number;
  measurand: string | null;
};
