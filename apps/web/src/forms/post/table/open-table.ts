import { draftsOf } from "@weighhouse/tables/drafts";
import { matchColumns } from "@weighhouse/tables/match-columns";
import { readTable } from "@weighhouse/tables/read-table";
import type { DraftRow, DraftTable, RawTable } from "@weighhouse/tables/raw-table";
import type { ColumnMatch, TableChoices, TableContext } from "@weighhouse/tables/table-match";
import type {
  Fate,
  MatchedTable,
  OpenedTable,
  Remembered,
  RowCounts,
  Show,
  ShownRow,
  TableSettings,
} from "./protocol";
import { mergedChoices } from "./choices";

const mostSamples = 3;

/** What the campaign said of a row. */
export type Judged = Pick<
  ShownRow,
  "fate" | "id" | "measurand" | "problems" | "conflict" | "notes"
>;

/** A file's rows, how they are read, and what the campaign said of each: what the worker holds. */
export class OpenTable {
  readonly opened: OpenedTable;
  private readonly table: RawTable | DraftTable;
  private rows: DraftRow[] = [];
  private judged = new Map<number, Judged>();
  private lists = new Map<Show, number[]>();

  constructor(
    name: string,
    bytes: Uint8Array,
    private readonly document: TableContext["document"],
  ) {
    const table = readTable(name, bytes);
    this.table = table;
    this.opened = {
      name,
      format: table.format,
      bytes: bytes.length,
      rows: table.rows.length,
      columns: table.columns.map((column, index) => ({
        ...column,
        samples: samplesOf(table, index),
      })),
      problems: table.problems,
      notes: table.notes,
    };
  }

  /** Reads the rows by their columns' match; whatever was known of them is forgotten. */
  match({ choices: own, remembered, defaults }: TableSettings): MatchedTable {
    const context: TableContext = { document: this.document, defaults };
    const facility = facilityOf(this.table, this.matches(context, own, null), defaults.facility);
    const kept = remembered.find((each) => each.facility === facility) ?? null;
    const matches = this.matches(context, own, kept);
    const choices = mergedChoices(own, kept?.choices ?? null);
    const { rows, problems, notes } = draftsOf(this.table, matches, context, choices);
    this.rows = rows.map((row) => withStatus(row, defaults.status));
    this.judged.clear();
    this.lists.clear();
    return {
      matches,
      facility,
      rememberedFor: kept?.facility ?? null,
      choices,
      counts: this.counts(),
      problems,
      notes,
    };
  }

  private matches(
    context: TableContext,
    own: TableChoices,
    kept: Remembered | null,
  ): ColumnMatch[] {
    const { table } = this;
    if (isDrafts(table)) return [];
    const found = matchColumns(table, context, mergedChoices(own, kept?.choices ?? null), "chosen");
    return found.map((match) =>
      match.why === "chosen" && own.columns[match.column] === undefined
        ? { ...match, why: "remembered" as const }
        : match,
    );
  }

  /** How many rows there are; a line with several results gives several. */
  get size(): number {
    return this.rows.length;
  }

  /** The rows to send, by their place: those that read, less those at fault where they are left out. */
  sendable(leaveOut: boolean): number[] {
    return this.places().filter((place) => {
      const fate = this.judged.get(place)?.fate;
      const left = leaveOut && (fate === "refused" || fate === "conflict");
      return reads(this.rows[place]!) && !left;
    });
  }

  draft(place: number): Record<string, unknown> {
    return this.rows[place]!.draft as Record<string, unknown>;
  }

  /** The rows that say something else than what is there, as measurements. */
  conflicts(): Record<string, unknown>[] {
    return this.list("conflict").map((place) => {
      // Where it falls the campaign has said; that it was found by its observable is no field.
      const { observable: _, ...draft } = this.draft(place);
      const { id, measurand } = this.judged.get(place)!;
      return { ...draft, id, measurand };
    });
  }

  /** Forgets what was said of these rows: they are asked about again. */
  forget(places: readonly number[]): void {
    for (const place of places) this.judged.delete(place);
    this.lists.clear();
  }

  judge(place: number, judged: Judged): void {
    this.judged.set(place, judged);
    this.lists.clear();
  }

  counts(): RowCounts {
    const counts = { new: 0, alreadyThere: 0, conflict: 0, refused: 0, unseen: 0 };
    for (const place of this.places()) counts[this.fate(place) ?? "unseen"] += 1;
    return counts;
  }

  shown(show: Show, from: number, count: number): ShownRow[] {
    return this.list(show)
      .slice(from, from + count)
      .map((place) => this.row(place));
  }

  nextFault(show: Show, after: number): number | null {
    const list = this.list(show);
    const isFault = (place: number) => ["refused", "conflict"].includes(this.fate(place) ?? "");
    const behind = list.findIndex((place, at) => at > after && isFault(place));
    if (behind !== -1) return behind;
    const first = list.findIndex(isFault);
    return first === -1 ? null : first;
  }

  private list(show: Show): number[] {
    const known = this.lists.get(show);
    if (known !== undefined) return known;
    const list =
      show === "all" ? this.places() : this.places().filter((place) => this.fate(place) === show);
    this.lists.set(show, list);
    return list;
  }

  private row(place: number): ShownRow {
    const { line, draft, problems, notes } = this.rows[place]!;
    const judged = this.judged.get(place);
    const own = draft as Record<string, unknown> | null;
    const named = own?.["measurand"];
    const given = own?.["id"];
    return {
      line,
      draft: own,
      fate: this.fate(place),
      id: judged?.id ?? (typeof given === "string" ? given : null),
      measurand: judged?.measurand ?? (typeof named === "string" ? named : null),
      problems: [...problems, ...(judged?.problems ?? [])],
      conflict: judged?.conflict ?? null,
      notes: [...new Set([...notes, ...(judged?.notes ?? [])])],
    };
  }

  private fate(place: number): Fate | null {
    return reads(this.rows[place]!) ? (this.judged.get(place)?.fate ?? null) : "refused";
  }

  private places(): number[] {
    return this.rows.map((_, place) => place);
  }
}

function reads({ draft, problems }: DraftRow): boolean {
  return draft !== null && problems.length === 0;
}

function isDrafts(table: RawTable | DraftTable): table is DraftTable {
  return table.format === "ndjson" || table.format === "document";
}

function withStatus(row: DraftRow, status: "final" | "provisional"): DraftRow {
  if (status === "final" || row.draft === null) return row;
  if ((row.draft.status ?? null) !== null) return row;
  return { ...row, draft: { ...row.draft, status } };
}

function samplesOf(table: RawTable | DraftTable, index: number): string[] {
  if (isDrafts(table)) return [];
  const samples: string[] = [];
  for (const { cells } of table.rows) {
    const cell = cells[index] ?? null;
    if (cell === null || cell === "") continue;
    samples.push(String(cell));
    if (samples.length === mostSamples) break;
  }
  return samples;
}

/** The facility of all rows: that of its column where it holds one alone, else the one for all. */
function facilityOf(
  table: RawTable | DraftTable,
  matches: readonly ColumnMatch[],
  fallback: string | null,
): string | null {
  const column = matches.findIndex(({ field }) => field === "facility");
  if (column === -1 || isDrafts(table)) return fallback;
  const named = new Set<string | null>();
  for (const { cells } of table.rows) {
    const cell = cells[column] ?? null;
    named.add(cell === null || cell === "" ? fallback : String(cell));
    if (named.size > 1) return null;
  }
  const [only = null] = named;
  return only;
}
