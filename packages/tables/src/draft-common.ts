import { addExtra, extraName } from "./draft-conditions";
import type { GivenCondition } from "./draft-conditions";
import type { DraftPlan, Slot } from "./draft-plan";
import { keyOf } from "./part-keys";
import { decimalText, numberCell, readNumber } from "./number-cells";
import type { RawCell, RawRow } from "./raw-table";
import type { RowProblem } from "./table";
import { readTime } from "./times/read-time";
import { extraCell, sharedCell } from "./word-cells";

export type Common = {
  fields: Record<string, unknown>;
  /** Conditions as they are given: what they are called and counted in is each observable's own. */
  conditions: GivenCondition[];
  /** An observable that the row names where it names no measurand. */
  observable: string | null;
  problems: RowProblem[];
};

/** What a row says once for all of its results. */
export function readCommon(plan: DraftPlan, row: RawRow): Common {
  const common: Common = { fields: {}, conditions: [], observable: null, problems: [] };
  for (const slot of plan.common) {
    const cell = row.cells[slot.index] ?? null;
    if (!slot.isMissing(cell)) addCell(plan, common, { slot, cell });
  }
  joinDate(plan, common, row);
  fillDefaults(plan, common);
  return common;
}

type Given = { slot: Slot; cell: RawCell };

function addCell(plan: DraftPlan, common: Common, { slot, cell }: Given): void {
  const { fields } = common;
  const { role } = slot;
  if (role === "date" || role === "timeOfDay") return;
  if (role === "extra") {
    addExtra(fields, extraName(slot), extraCell(cell));
  } else if (role.startsWith("conditions.")) {
    const name = role.slice("conditions.".length);
    common.conditions.push({ name, slot, value: numberCell(cell, plan.mark) });
  } else if (role === "observedAt" || role === "knownSince") {
    addTime(plan, common, { slot, cell });
  } else if (role === "observable") {
    common.observable = keyOf(plan.context.document.observables, String(cell));
  } else if (role === "measurand") {
    fields[role] = keyOf(plan.context.document.measurands, String(cell));
  } else if (role === "facility") {
    fields[role] = keyOf(plan.context.document.facilities ?? [], String(cell));
  } else if (role === "shared") {
    fields[role] = sharedCell(cell, (text) => readNumber(text, plan.mark) ?? text);
  } else {
    fields[role] = typeof cell === "number" ? String(cell) : cell;
  }
}

function addTime(plan: DraftPlan, common: Common, { slot, cell }: Given): void {
  const { time } = slot.match;
  const text = time === null || time.format === "iso" ? String(cell) : decimalText(cell, plan.mark);
  const read = readTime(text.trim(), time);
  if (read.ok) common.fields[slot.role] = read.time;
  else common.problems.push(refused(slot, cell, read.allowed));
}

/** A date and a time of day in two columns are one time. */
function joinDate(plan: DraftPlan, common: Common, { cells }: RawRow): void {
  const [date, clock] = ["date", "timeOfDay"].map((role) =>
    plan.common.find((one) => one.role === role),
  );
  if (date === undefined || clock === undefined) return;
  const [day, hour] = [cells[date.index] ?? null, cells[clock.index] ?? null];
  if (date.isMissing(day) && clock.isMissing(hour)) return;
  const isUtc = [date, clock].some(
    ({ column }) =>
      column.timeScale === "utc" ||
      column.timeScale === "ut" ||
      /(?:^|[^a-z])utc?$|^utc?(?:[^a-z]|$)/i.test(column.name),
  );
  const chosen = date.match.time ?? clock.match.time;
  const reading = chosen ?? (isUtc ? ({ format: "iso", scale: "utc", offset: 0 } as const) : null);
  const read = readTime(`${String(day)}T${String(hour)}`, reading);
  if (read.ok) common.fields["observedAt"] = read.time;
  else common.problems.push(refused(date, `${String(day)}T${String(hour)}`, read.allowed));
}

function refused(slot: Slot, cell: RawCell, allowed: string): RowProblem {
  return { column: slot.column.name, found: JSON.stringify(cell), allowed };
}

function fillDefaults({ context }: DraftPlan, { fields, observable }: Common): void {
  const { measurand, facility, team, batch } = context.defaults ?? {};
  if (measurand && observable === null) fields["measurand"] ??= measurand;
  if (facility) fields["facility"] ??= facility;
  if (team) fields["team"] ??= team;
  if (batch) fields["batch"] ??= batch;
}
