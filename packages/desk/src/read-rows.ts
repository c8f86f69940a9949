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

/** The rows of a CSV text or of a form's drafts; none at all is a problem of the whole. */
export function readRows(source: MeasurementSource, document: CampaignDocument): ReadRows {
  const read = source.from === "csv" ? readText(source, document) : readDrafts(source.drafts);
  if (read.rows.length > 0 || read.problems.length > 0) return read;
  const problem = { line: null, column: null, found: "no row", allowed: "one measurement or more" };
  return { ...read, problems: [problem] };
}

function readText(
  { text, defaults }: Extract<MeasurementSource, { from: "csv" }>,
  document: CampaignDocument,
): ReadRows {
  return readMeasurementTable(text, { document, defaults });
}

function readDrafts(drafts: Record<string, unknown>[]): ReadRows {
  const rows = drafts.map((draft, i) => ({ line: i + 1, draft, problems: [] }));
  return { rows, columns: [], problems: [] };
}
