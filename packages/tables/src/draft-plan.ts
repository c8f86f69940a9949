import type { Observable } from "@weighhouse/campaign/document";
import { measurandFinder } from "@weighhouse/campaign/measurand-of";
import { findDecimalMark } from "./decimal-mark";
import { RESULT_FIELDS } from "./field-names";
import { matchScope } from "./match-scope";
import type { MatchScope, Target } from "./match-scope";
import { valueUnit } from "./match-units";
import { missingCells } from "./missing-cells";
import type { DecimalMark } from "./number-cells";
import { numberCell } from "./number-cells";
import type { RawCell, RawColumn, RawTable } from "./raw-table";
import type { TableProblem } from "./table";
import type { ColumnMatch, TableChoices, TableContext } from "./table-match";

/** A column and what its cells fill. */
export type Slot = {
  index: number;
  column: RawColumn;
  match: ColumnMatch;
  /** The field without the target of a part. */
  role: string;
  isMissing: (cell: RawCell) => boolean;
};

/** The columns of one result; `target` null where each row says what it is of. */
export type Part = {
  target: Target | null;
  slots: Map<string, Slot>;
  unit: string | null;
  /** Lower errors are written as negative numbers. */
  minusIsNegative: boolean;
};

export type DraftPlan = {
  scope: MatchScope;
  context: TableContext;
  choices: Partial<TableChoices>;
  find: ReturnType<typeof measurandFinder>;
  mark: DecimalMark;
  common: Slot[];
  parts: Part[];
  problems: TableProblem[];
  notes: string[];
};

const RESULTS = new Set<string>(RESULT_FIELDS);
/** What may be said once for all results of a row. */
const SHARED_BY_PARTS = ["confidence", "sigmas", "noise", "status", "source", "setAside"];
const TEXTS = new Set([
  "id",
  "measurand",
  "observable",
  "facility",
  "team",
  "batch",
  "unit",
  "source",
  "sameData",
  "setAside",
  "shared",
  "status",
  "extra",
  "limit",
]);

/** What is the same for all rows of a table: which cell fills what, and how it is read. */
export function planDrafts(
  table: RawTable,
  matches: readonly ColumnMatch[],
  context: TableContext,
  choices: Partial<TableChoices>,
): DraftPlan {
  const scope = matchScope(context);
  const notes: string[] = [];
  const slots = table.columns.flatMap((column, index): Slot[] => {
    const match = matches[index];
    if (match === undefined || match.field === "ignore") return [];
    const [role = ""] = match.field.split("@");
    const holds = role === "id" ? "ids" : TEXTS.has(role) ? "texts" : "numbers";
    const missing = missingCells(table, index, holds);
    notes.push(...missing.notes);
    return [{ index, column, match, role, isMissing: missing.isMissing }];
  });
  const numeric = slots.filter(({ role, match }) => !TEXTS.has(role) && isNumeric(role, match));
  const found = findDecimalMark(
    table,
    numeric.map(({ index }) => index),
    choices.decimal ?? null,
  );
  if (found.note !== null) notes.push(found.note);
  const common = slots.filter(
    ({ match, role }) => !RESULTS.has(role) && !match.field.includes("@"),
  );
  const parts = partsOf(
    slots.filter((slot) => !common.includes(slot)),
    matches,
    scope,
  );
  const find = measurandFinder(context.document);
  const plan = { scope, context, choices, find, mark: found.mark, common, parts };
  for (const part of parts)
    part.minusIsNegative = isNegative(table, part.slots.get("minus"), found.mark);
  notes.push(...parts.flatMap(negativeNote));
  const problems = [found.problem, ...emptyParts(parts)].filter((one) => one !== null);
  return { ...plan, problems, notes };
}

function isNumeric(role: string, { time }: ColumnMatch): boolean {
  if (role === "occurred" || role === "date" || role === "timeOfDay" || role === "noise")
    return false;
  if (role === "upperLimit" || role === "lowerLimit") return false;
  return (
    (role !== "observedAt" && role !== "knownSince") || (time !== null && time.format !== "iso")
  );
}

function partsOf(slots: Slot[], matches: readonly ColumnMatch[], scope: MatchScope): Part[] {
  const groups = new Map<string, Map<string, Slot>>();
  for (const slot of slots) {
    const [, key = ""] = slot.match.field.split("@");
    const group = groups.get(key) ?? new Map<string, Slot>();
    group.set(slot.role, slot);
    groups.set(key, group);
  }
  const plain = groups.get("");
  if (plain !== undefined && groups.size > 1 && !hasResult(plain)) {
    for (const [key, group] of groups) {
      if (key === "") continue;
      for (const role of SHARED_BY_PARTS) {
        const slot = plain.get(role);
        if (slot !== undefined && !group.has(role)) group.set(role, slot);
      }
    }
    if ([...plain.keys()].every((role) => SHARED_BY_PARTS.includes(role))) groups.delete("");
  }
  return [...groups].map(([key, group]) => ({
    target: key === "" ? null : (scope.targets.get(key) ?? null),
    slots: group,
    unit: valueUnit(matches, key),
    minusIsNegative: false,
  }));
}

function hasResult(slots: Map<string, Slot>): boolean {
  return slots.has("value") || slots.has("count") || slots.has("occurred");
}

function emptyParts(parts: Part[]): TableProblem[] {
  const problems = parts.flatMap(({ slots, target }) => {
    if (hasResult(slots)) return [];
    const [slot] = slots.values();
    const of = target === null ? "" : ` of ${target.key}`;
    return [
      {
        line: null,
        column: slot?.column.name ?? null,
        found: `a column for ${slot?.role}, and none for the value${of} that it belongs to`,
        allowed: "a column that is, or is chosen to be, value, count or occurred",
      },
    ];
  });
  if (parts.length > 0) return problems;
  const found = "no column that holds a result";
  const allowed = "a column that is, or is chosen to be, value, count or occurred";
  return [{ line: null, column: null, found, allowed }];
}

function isNegative(table: RawTable, slot: Slot | undefined, mark: DecimalMark): boolean {
  if (slot === undefined) return false;
  let negative = false;
  for (const { cells } of table.rows) {
    const value = numberCell(cells[slot.index] ?? null, mark);
    if (typeof value !== "number") continue;
    if (value > 0) return false;
    if (value < 0) negative = true;
  }
  return negative;
}

function negativeNote({ minusIsNegative, slots }: Part): string[] {
  if (!minusIsNegative) return [];
  return [
    `Column ${slots.get("minus")!.column.name}: lower errors are written as negative numbers, and taken without the sign.`,
  ];
}

/** The observable whose scale tells how a part's limits are meant. */
export function observableOfPart(
  { scope }: DraftPlan,
  { target }: Part,
  row: { measurand?: unknown; observable?: unknown },
): Observable | null {
  if (target !== null) return target.observable;
  const key = row.measurand ?? row.observable;
  const said = typeof key === "string" ? scope.targets.get(key) : undefined;
  if (said !== undefined) return said.observable;
  return scope.observables.length === 1 ? scope.observables[0]! : null;
}
