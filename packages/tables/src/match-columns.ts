import type { RawTable } from "./raw-table";
import type { ColumnMatch, TableChoices, TableContext } from "./table-match";

/** One match for each column, in their order. Choices go before what the table says itself. */
export declare function matchColumns(
  table: Pick<RawTable, "columns"> & { rows: readonly unknown[] },
  context: TableContext,
  choices?: Partial<TableChoices>,
  origin?: "chosen" | "remembered",
): ColumnMatch[];
