import { measurementFields } from "@weighhouse/campaign/measurement";
import { optional, measurementId } from "@weighhouse/campaign/fields";
import { readForm } from "@weighhouse/campaign/form";
import * as z from "zod";
import { cellValue, extraValue, readTime } from "./cells";
import { matchColumns, type ColumnContext, type Columns } from "./columns";
import { readRecords, type CsvRecord } from "./records";
import type { MeasurementDraft, MeasurementTable, RowProblem, TableRow } from "./table";

export { writeCsv, type CsvCell } from "./write-csv";

export type TableOptions = {
  document: ColumnContext;
  /** Given to rows whose column is absent or whose cell is empty. */
  defaults?: { measurand?: string | null; facility?: string | null };
};

/** A measurement's form, the id optional: posting makes one from the row's content. */
const draftSchema = z.strictObject({ ...measurementFields, id: optional(measurementId) });

/**
 * Reads a table of measurements: each row becomes a draft, or problems with its line and column.
 * Nothing is guessed and nothing dropped: columns that fill no field are kept as `extra` under
 * their own names. What a row says is checked for its form here; whether it fits the campaign (its
 * window, its scale, its unit) is for the campaign's rules.
 */
export function readMeasurementTable(text: string, options: TableOptions): MeasurementTable {
  const { separator, records, problems } = readRecords(text);
  const header = records[0];
  if (problems.length > 0 || header === undefined) {
    return { separator, columns: [], rows: [], problems };
  }
  const matched = matchColumns(header.cells, header.line, options.document);
  const reader = rowReader(matched, options);
  return {
    separator,
    columns: matched.columns,
    rows: matched.problems.length > 0 ? [] : records.slice(1).map(reader),
    problems: matched.problems,
  };
}

function rowReader(matched: Columns, options: TableOptions): (record: CsvRecord) => TableRow {
  const columnOf = new Map(
    matched.columns.map(({ column, field }) => [field ?? `extra.${column}`, column]),
  );
  const conditionUnits = unitsOfConditions(options.document);
  return ({ line, cells }) => {
    const expected = matched.columns.length;
    if (cells.length !== expected) {
      const found = `${cells.length} ${cells.length === 1 ? "cell" : "cells"}`;
      const allowed = `${expected}, as in the header`;
      return { line, draft: null, problems: [{ column: null, found, allowed }] };
    }
    const draft = fillDraft(cells, matched, options);
    const problems = [
      ...unitProblems(cells, draft, matched),
      ...conditionProblems(draft, matched, conditionUnits),
      ...formProblems(draft, columnOf),
    ];
    return { line, draft: problems.length === 0 ? (draft as MeasurementDraft) : null, problems };
  };
}

type Filled = Record<string, unknown> & {
  conditions?: Record<string, unknown>;
  extra?: Record<string, unknown>;
};

function fillDraft(cells: readonly string[], matched: Columns, options: TableOptions): Filled {
  const draft: Filled = {};
  matched.columns.forEach(({ column, field }, index) => {
    const text = cells[index] ?? "";
    if (text === "") return;
    if (field === null) {
      draft.extra = { ...draft.extra, [column]: extraValue(text) };
    } else if (field.startsWith("conditions.")) {
      const name = field.slice("conditions.".length);
      draft.conditions = { ...draft.conditions, [name]: cellValue(field, text) };
    } else if (field === "observedAt") {
      draft.observedAt = observedAt(cells, index, matched);
    } else {
      draft[field] = cellValue(field, text);
    }
  });
  const { measurand, facility } = options.defaults ?? {};
  if (draft.measurand === undefined && measurand) draft.measurand = measurand;
  if (draft.facility === undefined && facility) draft.facility = facility;
  if (draft.unit === undefined && matched.unit !== null) draft.unit = matched.unit;
  return draft;
}

/** A date and a time of day in two columns are one time. */
function observedAt(cells: readonly string[], index: number, matched: Columns): string {
  const joined = matched.dateAndTime;
  const isPart = joined !== null && (index === joined.date || index === joined.time);
  const whole = isPart ? `${cells[joined.date]}T${cells[joined.time]}` : (cells[index] ?? "");
  const bare = /[Zz]$|UTC$|[+-]\d{2}:\d{2}$/.exec(whole) === null;
  return readTime(bare && matched.utc ? `${whole}Z` : whole);
}

function unitProblems(cells: readonly string[], draft: Filled, matched: Columns): RowProblem[] {
  const index = matched.columns.findIndex(({ field }) => field === "unit");
  if (index === -1 || matched.unit === null || draft.unit === matched.unit) return [];
  return [
    {
      column: matched.columns[index]?.column ?? null,
      found: `the unit ${cells[index]} under a header in ${matched.unit}`,
      allowed: "the header's unit, or none in the header",
    },
  ];
}

/** Units of conditions by measurand and name. */
function unitsOfConditions(document: ColumnContext): Map<string, Map<string, string | null>> {
  const byObservable = new Map(
    document.observables.map(({ key, conditions }) => [
      key,
      new Map(conditions.map((condition) => [condition.key, condition.unit])),
    ]),
  );
  return new Map(
    document.measurands.map(({ key, observable }) => [
      key,
      byObservable.get(observable) ?? new Map(),
    ]),
  );
}

function conditionProblems(
  draft: Filled,
  matched: Columns,
  units: ReturnType<typeof unitsOfConditions>,
): RowProblem[] {
  const own = units.get(String(draft.measurand));
  return matched.columns.flatMap(({ column, field, unit }) => {
    const name = field?.startsWith("conditions.") ? field.slice("conditions.".length) : null;
    if (name === null || unit === null || draft.conditions?.[name] === undefined) return [];
    const wanted = own?.get(name);
    if (wanted === undefined || wanted === unit) return [];
    return [
      { column, found: `${name} in ${unit}`, allowed: wanted ?? "a condition without a unit" },
    ];
  });
}

/** What the schema refuses, told by column. The quick check comes first: most rows are good. */
function formProblems(draft: Filled, columnOf: Map<string, string>): RowProblem[] {
  if (draftSchema.safeParse(draft).success) return [];
  return readForm(draftSchema, draft, "").problems.map(({ pointer, found, allowed }) => {
    const steps = pointer
      .split("/")
      .slice(1)
      .map((step) => step.replaceAll("~1", "/").replaceAll("~0", "~"));
    const [field = ""] = steps;
    const nested = steps.slice(0, 2).join(".");
    return {
      column: columnOf.get(nested) ?? columnOf.get(field) ?? (field || null),
      found,
      allowed,
    };
  });
}
