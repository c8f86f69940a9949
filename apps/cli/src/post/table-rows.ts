import { createHash } from "node:crypto";
import { draftsOf } from "@weighhouse/tables/drafts";
import { layoutText } from "@weighhouse/tables/layout";
import { matchColumns } from "@weighhouse/tables/match-columns";
import type { DraftTable, RawTable } from "@weighhouse/tables/raw-table";
import { readTable } from "@weighhouse/tables/read-table";
import type { TableProblem } from "@weighhouse/tables/table";
import type { ColumnMatch, TableChoices, TableContext } from "@weighhouse/tables/table-match";

/** A table's rows as lines of NDJSON, or why they are none. */
export type TableRows = {
  /** Of what can be sent: each ends its line. */
  text: string;
  /** For each of those lines, the line of the file that it was made of. */
  lines: number[];
  matches: ColumnMatch[];
  problems: TableProblem[];
  notes: string[];
};

/** What the server knows of tables: its declarations, and what was chosen before. */
export type ServerContext = TableContext["document"] & {
  remembered: { facility: string; choices: TableChoices }[];
};

export type TableOptions = {
  defaults: NonNullable<TableContext["defaults"]>;
  /** By column name the field that it fills. */
  chosen: Record<string, string>;
  /** Asks the server, by the SHA-256 of the table's layout. */
  context: (layout: string) => Promise<ServerContext>;
};

/**
 * Reads a table of any format, matches its columns by what they say themselves, by what is remembered
 * for the facility and by what was chosen now, and makes a measurement of each row.
 */
export async function tableRows(
  name: string,
  bytes: Uint8Array,
  options: TableOptions,
): Promise<TableRows> {
  const table = readTable(name, bytes);
  const layout = createHash("sha256").update(layoutText(table.columns)).digest("hex");
  const { remembered, ...document } = await options.context(layout);
  const context: TableContext = { document, defaults: options.defaults };
  const known = remembered.find(({ facility }) => facility === options.defaults.facility);
  const strangers = Object.keys(options.chosen).filter(
    (column) => !table.columns.some((one) => one.name === column),
  );
  const choices: Partial<TableChoices> = {
    ...known?.choices,
    columns: { ...known?.choices.columns, ...options.chosen },
  };
  const matches = matched(table, context, choices);
  const { rows, problems, notes } = draftsOf(table, matches, context, choices);
  const good = rows.flatMap(({ line, draft }) => (draft === null ? [] : [{ line, draft }]));
  return {
    text: good.map(({ draft }) => `${JSON.stringify(draft)}\n`).join(""),
    lines: good.map(({ line }) => line),
    matches,
    problems: [
      ...strangers.map((column) => noSuchColumn(column, table)),
      ...problems,
      ...rows.flatMap((row) => row.problems.map((problem) => ({ line: row.line, ...problem }))),
    ],
    notes: [...notes, ...rowNotes(rows)],
  };
}

function matched(
  table: RawTable | DraftTable,
  context: TableContext,
  choices: Partial<TableChoices>,
): ColumnMatch[] {
  return table.format === "ndjson" || table.format === "document"
    ? []
    : matchColumns(table, context, choices);
}

function noSuchColumn(column: string, { columns }: RawTable | DraftTable): TableProblem {
  const names = columns.map(({ name }) => name).join(", ");
  return {
    line: null,
    column,
    found: "no such column",
    allowed: names === "" ? "no column to match: its rows name their fields" : `one of ${names}`,
  };
}

/** Rows mostly share what is said of them: each sentence once, with how many it is true of. */
function rowNotes(rows: readonly { notes: string[] }[]): string[] {
  const counts = new Map<string, number>();
  for (const note of rows.flatMap(({ notes }) => notes)) {
    counts.set(note, (counts.get(note) ?? 0) + 1);
  }
  return [...counts].map(([note, count]) => (count === 1 ? note : `${note} (${count} rows)`));
}
