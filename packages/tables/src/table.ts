import type * as z from "zod";
import type { measurementSchema } from "@weighhouse/campaign/measurement";

export type Separator = "," | ";" | "\t" | "|";

/** A measurement as its row gives it, before defaults: fields that the row leaves empty are absent. */
export type MeasurementDraft = Omit<z.input<typeof measurementSchema>, "id" | "postedAt"> & {
  id?: string;
};

/** What is wrong in a row; `column` as the header has it, null for the row as a whole. */
export type RowProblem = { column: string | null; found: string; allowed: string };

export type TableRow = {
  /** The row's first line in the text, from 1. */
  line: number;
  /** Null where the row is refused. */
  draft: MeasurementDraft | null;
  problems: RowProblem[];
};

/** What is wrong with the text as a whole, or with its header. */
export type TableProblem = RowProblem & { line: number | null };

export type TableColumn = {
  /** As the header has it. */
  column: string;
  /** The measurement's field that it fills; `conditions.depth` for a condition; null: kept as extra. */
  field: string | null;
  /** Given in the header, as in `value [Jy]`. */
  unit: string | null;
};

export type MeasurementTable = {
  separator: Separator;
  columns: TableColumn[];
  rows: TableRow[];
  problems: TableProblem[];
};
