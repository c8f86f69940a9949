import { assignFields } from "./assign-fields";
import type { Assigned } from "./assignment";
import { matchScope } from "./match-scope";
import type { MatchScope } from "./match-scope";
import { timeMatch } from "./match-times";
import { unitMatch } from "./match-units";
import type { RawColumn, RawTable } from "./raw-table";
import type { ColumnMatch, TableChoices, TableContext } from "./table-match";

/**
 * One match for each column, in their order. Choices go before what the table says itself: a
 * column's own name, then synonyms, then its UCD, then its unit; columns are paired with the one
 * that they are an uncertainty or a limit flag of. What fills no field is `extra`, and a column
 * that can't be read as it would have to be has its `problem`.
 *
 * @param origin whether the choices were made now, or are remembered
 */
export function matchColumns(
  table: Pick<RawTable, "columns"> & { rows: readonly unknown[] },
  context: TableContext,
  choices: Partial<TableChoices> = {},
  origin: "chosen" | "remembered" = "chosen",
): ColumnMatch[] {
  const scope = matchScope(context);
  const raw = table as Pick<RawTable, "columns" | "rows">;
  const assigned = assignFields(raw, scope, { fields: choices.columns ?? {}, origin });
  const matches = raw.columns.map((column, index) => {
    const { field, why } = assigned[index]!;
    const unit = own(choices.units, column.name) ?? column.unit;
    const plain = { column: column.name, field, why, unit, conversion: null, time: null };
    const match: ColumnMatch = { ...plain, problem: null };
    const refused = refusal(raw.columns, index, assigned, scope);
    if (refused !== null) return { ...match, problem: refused };
    if (field === "date" || field === "timeOfDay") {
      return { ...match, time: own(choices.times, column.name) };
    }
    if (field === "observedAt" || field === "knownSince") {
      return timeMatch(
        match,
        { column, cells: cellsOf(raw, index) },
        own(choices.times, column.name),
      );
    }
    return match;
  });
  return matches.map((match) => unitMatch(match, matches, scope));
}

function own<V>(record: Record<string, V> | undefined, name: string): V | null {
  return record !== undefined && Object.hasOwn(record, name) ? record[name]! : null;
}

function* cellsOf(table: Pick<RawTable, "rows">, index: number) {
  for (const { cells } of table.rows) yield cells[index] ?? null;
}

/** Why a column can't be what it is assigned to, whatever its cells hold. */
function refusal(
  columns: readonly RawColumn[],
  index: number,
  assigned: readonly Assigned[],
  scope: MatchScope,
): ColumnMatch["problem"] {
  const { field, known } = assigned[index]!;
  const { name } = columns[index]!;
  if (!known) {
    const keys = [...scope.conditions].map((key) => `conditions.${key}`);
    const allowed = `a measurement's field, ${keys.map((key) => `${key}, `).join("")}a result's field with @ and a measurand or observable, extra or ignore`;
    return { found: `the field ${field}`, allowed };
  }
  if (columns.findIndex((one) => one.name === name) < index) {
    return { found: "a column that is there twice", allowed: "each name for one column" };
  }
  if (field === "extra" || field === "ignore") return null;
  const first = assigned.findIndex((one) => one.field === field);
  if (first === index) return null;
  const found = `a column that fills ${field}, as the column ${columns[first]!.name} does`;
  return { found, allowed: "each field in one column; choose another field, extra or ignore" };
}
