import type { RowProblem, TableProblem } from "@weighhouse/tables/table";
import type { RawColumn, RawTable, DraftTable } from "@weighhouse/tables/raw-table";
import type { ColumnMatch, TableChoices, TableContext } from "@weighhouse/tables/table-match";
import type { JudgedRow } from "@weighhouse/desk/judge-rows";
import type { StandingsChanges } from "@weighhouse/desk/standings-changes";
import type { Refusal } from "../../refusal";

/** What the page and the worker that holds its table say to each other. */

export type Fate = JudgedRow["fate"];

/** What fills rows that don't say it themselves. */
export interface RowDefaults {
  measurand: string | null;
  facility: string | null;
  batch: string | null;
  status: "final" | "provisional";
}

/** What was chosen for a facility's tables with the same columns when one was posted last. */
export interface Remembered {
  facility: string;
  choices: TableChoices;
}

export interface TableSettings {
  /** Chosen here; goes before what is remembered. */
  choices: TableChoices;
  remembered: Remembered[];
  defaults: RowDefaults;
}

export interface OpenedColumn extends RawColumn {
  /** The first cells that hold something, as text. */
  samples: string[];
}

export interface OpenedTable {
  name: string;
  format: (RawTable | DraftTable)["format"];
  bytes: number;
  rows: number;
  columns: OpenedColumn[];
  problems: TableProblem[];
  notes: string[];
}

export interface MatchedTable {
  matches: ColumnMatch[];
  /** The one facility of all rows that is known before they are read; null: several, or none. */
  facility: string | null;
  /** For whom the match in use was remembered. */
  rememberedFor: string | null;
  /** What was chosen here and what is remembered, as one: what is kept on posting. */
  choices: TableChoices;
  counts: RowCounts;
  problems: TableProblem[];
  notes: string[];
}

/** `unseen`: they read, and the campaign was not asked about them yet. */
export type RowCounts = Record<Fate | "unseen", number>;

export interface PreviewedTable {
  counts: RowCounts;
  /** How many rows at fault were left out, as asked for. */
  leftOut: number;
  problems: { found: string; allowed: string }[];
  postable: boolean;
  changes: StandingsChanges | null;
}

export interface PostedTable {
  posted: number;
  alreadyThere: number;
  entries: { from: number; to: number } | null;
  leftOut: number;
}

/** Which rows are listed: all of them, or those of one fate. */
export type Show = "all" | Fate;

export interface ShownRow {
  line: number;
  /** Null: not previewed yet. */
  fate: Fate | null;
  id: string | null;
  /** As it would be posted; null where it doesn't read. */
  draft: Record<string, unknown> | null;
  measurand: string | null;
  problems: RowProblem[];
  conflict: { field: string; there: unknown; posted: unknown } | null;
  notes: string[];
}

/** Each call: what it takes, what it gives. */
export interface Calls {
  open: {
    takes: { file: Blob; name: string; document: TableContext["document"] };
    gives: OpenedTable;
  };
  match: { takes: TableSettings; gives: MatchedTable };
  preview: { takes: { campaign: string; leaveOut: boolean }; gives: PreviewedTable };
  /** `attempt`: the same one again for what was previewed, so that nothing is entered twice. */
  post: { takes: { campaign: string; attempt: string }; gives: PostedTable };
  /** The rows in conflict, each with its id and its measurand. */
  conflicts: { takes: null; gives: Record<string, unknown>[] };
  rows: { takes: { show: Show; from: number; count: number }; gives: ShownRow[] };
  /** The place in the list of the next row at fault behind `after`, from the start again; null: none. */
  nextFault: { takes: { show: Show; after: number }; gives: number | null };
  /** Ends a preview or a posting that is under way. */
  stop: { takes: null; gives: null };
}
export type Call = keyof Calls;

export type ToWorker = { [C in Call]: { number: number; call: C; input: Calls[C]["takes"] } }[Call];

export type FromWorker =
  | { number: number; gives: unknown }
  /** `answered`: the server said so; else its answer was lost. */
  | { number: number; refusal: Refusal; answered: boolean }
  | { number: number; failure: string }
  | { progress: Progress };

export interface Progress {
  stage: "file" | "reading" | "rows" | "sending" | "read" | "check" | "enter";
  /** Rows, or for `file` and `sending` bytes. */
  done: number;
  total: number | null;
}
