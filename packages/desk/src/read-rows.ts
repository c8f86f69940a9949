import type { CampaignDocument } from "@weighhouse/campaign/document";
import { draftsOf } from "@weighhouse/tables/drafts";
import { matchColumns } from "@weighhouse/tables/match-columns";
import { readTable, readText } from "@weighhouse/tables/read-table";
import type { TableColumn, TableProblem } from "@weighhouse/tables/table";
import type { TableChoices, TableContext } from "@weighhouse/tables/table-match";
import type { MeasurementSource } from "./measurement-source";

/** What is wrong in a row; `column` null where it is the row as a whole. */
export type RowProblem = { column: string | null; found: string; allowed: string };

/** A row as it was given: the fields that are there, before anything is filled or checked. */
export type ReadRow = {
  line: number;
  draft: Record<string, unknown> | null;
  problems: RowProblem[];
  /** What was converted or filled in for it. */
  notes?: string[];
};

export type ReadRows = {
  rows: ReadRow[];
  columns: TableColumn[];
  problems: TableProblem[];
};

/** A source as it may be put together: a file's defaults where there are any. */
type Source =
  Extract<MeasurementSource, { from: "drafts" }> | FileSource<"csv"> | FileSource<"table">;
type FileSource<F> = Omit<Extract<MeasurementSource, { from: F }>, "defaults"> & {
  defaults?: TableContext["defaults"];
};

/** The rows of a table or of a form's drafts; none at all is a problem of the whole. */
export function readRows(source: Source, document: CampaignDocument): ReadRows {
  const read = source.from === "drafts" ? readDrafts(source.drafts) : readFile(source, document);
  if (read.rows.length > 0 || read.problems.length > 0) return read;
  const problem = { line: null, column: null, found: "no row", allowed: "one measurement or more" };
  return { ...read, problems: [problem] };
}

function readFile(
  source: FileSource<"csv"> | FileSource<"table">,
  document: CampaignDocument,
): ReadRows {
  const context: TableContext = { document, defaults: source.defaults ?? {} };
  if (source.from === "csv") return rowsOfTable(readText("table.csv", source.text), context);
  const { name, content, choices } = source;
  const table = typeof content === "string" ? readText(name, content) : readTable(name, content);
  return rowsOfTable(table, context, choices ?? {});
}

/** A table's rows as drafts, by what its columns say and what is chosen, or remembered, for them. */
export function rowsOfTable(
  table: ReturnType<typeof readTable>,
  context: TableContext,
  choices: Partial<TableChoices> = {},
): ReadRows {
  const matches = matchColumns(table, context, choices);
  const { rows, problems } = draftsOf(table, matches, context, choices);
  const columns = matches.map(({ column, field, unit }) => ({
    column,
    field: field === "extra" || field === "ignore" ? null : field,
    unit,
  }));
  return { rows, columns, problems };
}

function readDrafts(drafts: Record<string, unknown>[]): ReadRows {
  const rows = drafts.map((draft, i) => ({ line: i + 1, draft, problems: [] }));
  return { rows, columns: [], problems: [] };
}
