import type { DraftRow, DraftTable, RawTable } from "./raw-table";
import type { ColumnMatch, TableChoices, TableContext } from "./table-match";
import type { TableProblem } from "./table";

/**
 * The drafts of a table's rows; with a problem of the table or of a column's match there are none.
 * A table with several measurands side by side gives several for one line.
 */
export declare function draftsOf(
  table: RawTable | DraftTable,
  matches: readonly ColumnMatch[],
  context: TableContext,
  choices?: Partial<TableChoices>,
): { rows: DraftRow[]; problems: TableProblem[]; notes: string[] };
