import type { MatchScope } from "./match-scope";
import type { RawColumn, RawTable } from "./raw-table";
import type { ColumnMatch } from "./table-match";

export type Assigned = {
  field: string;
  why: ColumnMatch["why"];
  /** Whether there is such a field; a chosen one may be none. */
  known: boolean;
};

export type Table = Pick<RawTable, "columns" | "rows">;

/** What each column is assigned to so far; null where nothing is known yet. */
export type Assignment = { table: Table; scope: MatchScope; fields: (Assigned | null)[] };

export function assign(at: Assignment, index: number, field: string, why: Assigned["why"]): void {
  at.fields[index] ??= { field, why, known: true };
}

/** Columns that nothing is assigned to yet. */
export function open({ table, fields }: Assignment): [RawColumn, number][] {
  return table.columns.flatMap((column, index): [RawColumn, number][] =>
    fields[index] === null ? [[column, index]] : [],
  );
}

export function has({ fields }: Assignment, ...wanted: string[]): boolean {
  return fields.some((one) => one !== null && wanted.includes(one.field.split("@")[0]!));
}
