import type { CampaignDocument } from "@weighhouse/campaign/document";
import { readMeasurementTable } from "@weighhouse/tables/csv";
import type { TableColumn, TableProblem } from "@weighhouse/tables/table";
import type { MeasurementSource } from "./measurement-source";

/** What is wrong in a row; `column` null where it is the row as a whole. */
export type RowProblem = { column: string | null; found: string; allowed: string };

/** A row as it was given: the fields that are there, before anything is filled or checked. */
export type ReadRow = {
  line: number;
  draft: Record<string, unknown> | null;
  problems: RowProblem[];
};

export type ReadRows = {
  rows: ReadRow[];
  columns: TableColumn[];
  problems: TableProblem[];
};

/** The rows of a CSV text or of a form's drafts. */
export function readRows(source: MeasurementSource, document: CampaignDocument): ReadRows {
  if (source.from === "csv") {
    return readMeasurementTable(source.text, { document, defaults: source.defaults });
  }
  const rows = source.drafts.map((draft, i) => ({ line: i + 1, draft, problems: [] }));
  return { rows, columns: [], problems: [] };
}
