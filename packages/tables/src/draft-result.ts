import type { Observable } from "@weighhouse/campaign/document";
import { conversion } from "@weighhouse/campaign/units";
import type { DraftPlan, Part, Slot } from "./draft-plan";
import { limitSide, limitWord } from "./limit-words";
import type { LimitSide } from "./limit-words";
import { numberCell, readNumber } from "./number-cells";
import type { RawCell } from "./raw-table";
import type { RowProblem } from "./table";
import { booleanCell, setAsideCell, sourceCell, statusCell } from "./word-cells";

export type Result = {
  fields: Record<string, unknown>;
  /** What has no place beside such a result and is kept under its column's name. */
  extra: Record<string, RawCell>;
  problems: RowProblem[];
  notes: string[];
};

const SIGNED = /^(<=|>=|<|>|≤|≥)\s*(.+)$/;
const WITH_ERROR = /^(\S+?)\s*(?:±|\+\/-|\+-)\s*(\S+)$/;
const WITH_ERRORS =
  /^(.*?[\d.,])\s*\+\s*([\d.,]+(?:[eE][+-]?\d+)?)\s*\/?\s*[-\u2212–]\s*([\d.,]+(?:[eE][+-]?\d+)?)$/;

type Reading = Result & {
  plan: DraftPlan;
  part: Part;
  observable: Observable | null;
  cells: readonly RawCell[];
};

/** One part's result in a row; null where nothing of it is there. */
export function readResult(
  plan: DraftPlan,
  part: Part,
  row: { cells: readonly RawCell[]; observable: Observable | null },
): Result | null {
  const at: Reading = { fields: {}, extra: {}, problems: [], notes: [], plan, part, ...row };
  const sides = [
    flaggedSide(at, "limit"),
    booleanSide(at, "upperLimit"),
    booleanSide(at, "lowerLimit"),
  ];
  const flag = sides.find((side) => side !== null && side.side !== "none") ?? null;
  for (const role of ["count", "exposure", "background", "efficiency", "falseAlarm"])
    addNumber(at, role);
  addOccurred(at);
  addValue(at, flag);
  addErrors(at);
  const found = at.fields;
  const isThere = ["value", "count", "occurred", "sd", "sdDex", "plus", "minus"].some(
    (one) => one in found,
  );
  if (!isThere && flag === null && at.problems.length === 0) return null;
  if ("value" in found || flag !== null) addLimit(at, flag);
  else dropLevels(at);
  addWords(at);
  lacksValue(at, flag);
  return { fields: found, extra: at.extra, problems: at.problems, notes: at.notes };
}

type Flag = { side: LimitSide; isSign: boolean; column: string };

function cellOf({ part, cells }: Reading, role: string): { slot: Slot; cell: RawCell } | null {
  const slot = part.slots.get(role);
  const cell = slot === undefined ? null : (cells[slot.index] ?? null);
  return slot === undefined || slot.isMissing(cell) ? null : { slot, cell };
}

function flaggedSide(at: Reading, role: string): Flag | null {
  const given = cellOf(at, role);
  if (given === null) return null;
  const { slot, cell } = given;
  const side = limitSide(cell);
  if (side === null) {
    const allowed =
      '"<", ">", "upper", "lower", "fainter", "brighter" or nothing; or choose extra for the column';
    at.problems.push({ column: slot.column.name, found: JSON.stringify(cell), allowed });
    return null;
  }
  return { side, isSign: /[<>≤≥]/.test(String(cell)), column: slot.column.name };
}

function booleanSide(at: Reading, role: "upperLimit" | "lowerLimit"): Flag | null {
  const given = cellOf(at, role);
  if (given === null) return null;
  const { slot, cell } = given;
  const yes = booleanCell(cell);
  const column = slot.column.name;
  if (typeof yes !== "boolean") {
    at.problems.push({
      column,
      found: JSON.stringify(cell),
      allowed: "yes, no, true, false, 1, 0 or nothing",
    });
    return null;
  }
  if (!yes) return null;
  return { side: role === "upperLimit" ? "below" : "above", isSign: false, column };
}

function addNumber(at: Reading, role: string): void {
  const given = cellOf(at, role);
  if (given !== null) at.fields[role] = numberCell(given.cell, at.plan.mark);
}

function addOccurred(at: Reading): void {
  const given = cellOf(at, "occurred");
  if (given !== null) at.fields["occurred"] = booleanCell(given.cell);
}

function addValue(at: Reading, flag: Flag | null): void {
  const given = cellOf(at, "value");
  if (given === null) return;
  const { slot, cell } = given;
  const { mark } = at.plan;
  if (typeof cell !== "string") {
    at.fields["value"] = cell;
    return;
  }
  const [, sign = null, behind = cell] = SIGNED.exec(cell) ?? [];
  if (sign !== null) {
    at.fields["value"] = numberCell(behind, mark);
    const side = limitSide(sign)!;
    if (flag !== null && flag.side !== side) {
      const found = `${JSON.stringify(cell)} beside another limit in ${flag.column}`;
      at.problems.push({ column: slot.column.name, found, allowed: "one kind of limit" });
    }
    setLimit(at, { side, isSign: true, column: slot.column.name });
    return;
  }
  const one = WITH_ERROR.exec(cell);
  const two = one === null ? WITH_ERRORS.exec(cell) : null;
  const [, value, first, second] = one ?? two ?? [];
  const numbers = [value, first, second].map((text) =>
    text === undefined ? null : readNumber(text, mark),
  );
  if (numbers[0] === null || numbers[0] === undefined || numbers[1] === null) {
    at.fields["value"] = numberCell(cell, mark);
    return;
  }
  at.fields["value"] = numbers[0];
  if (two === null) at.fields["sd"] = numbers[1];
  else Object.assign(at.fields, { plus: numbers[1], minus: numbers[2] });
}

/** Uncertainties in the value's unit. */
function addErrors(at: Reading): void {
  for (const role of ["sd", "sdDex", "plus", "minus"]) {
    const given = cellOf(at, role);
    if (given === null) continue;
    const { slot } = given;
    const column = slot.column.name;
    if (at.fields["sd"] !== undefined || at.fields[role] !== undefined) {
      const found = "an uncertainty beside the one in the value's cell";
      at.problems.push({ column, found, allowed: "one of them" });
      continue;
    }
    at.fields[role] = widthOf(at, role, given);
  }
}

function widthOf(
  { plan, part }: Reading,
  role: string,
  { slot, cell }: { slot: Slot; cell: RawCell },
) {
  const number = numberCell(cell, plan.mark);
  if (typeof number !== "number") return number;
  const width = role === "minus" && part.minusIsNegative ? Math.abs(number) : number;
  const { unit } = slot.match;
  if (role === "sdDex" || unit === null || part.unit === null || unit === part.unit) return width;
  const found = conversion(unit, part.unit);
  return found.kind === "factor" ? width * found.factor : width;
}

function setLimit(at: Reading, { side, isSign }: Flag): void {
  if (side === "none") return;
  const isMagnitude = at.observable?.scale === "magnitude";
  const word = limitWord(side, { isMagnitude, isSign });
  at.fields["limit"] = word;
  if (isMagnitude && side !== word) {
    const given = isSign ? (side === "below" ? "<" : ">") : side === "below" ? "upper" : "lower";
    at.notes.push(`A limit "${given}" on a magnitude is read as ${word}.`);
  }
}

/** What a limit is said at: in the row, else as chosen for the table. */
function addLimit(at: Reading, flag: Flag | null): void {
  if (flag !== null) setLimit(at, flag);
  if (at.fields["limit"] === undefined) {
    dropLevels(at);
    return;
  }
  for (const role of ["sd", "sdDex", "plus", "minus"]) {
    if (at.fields[role] !== 0) continue;
    delete at.fields[role];
    at.notes.push(`A limit's uncertainty of 0 is read as none.`);
  }
  addLevel(at, "confidence");
  addLevel(at, "sigmas");
  if (["sd", "confidence", "sigmas"].some((role) => at.fields[role] !== undefined)) return;
  const { limits } = at.plan.choices;
  if (limits) {
    Object.assign(at.fields, limits);
    const [[role, level] = []] = Object.entries(limits);
    at.notes.push(`The limit is taken at ${role} ${level}, as chosen for the table.`);
    return;
  }
  const column = flag?.column ?? at.part.slots.get("value")?.column.name ?? null;
  const found = "a limit that nothing says the confidence of";
  const allowed =
    "a column confidence or sigmas, or one of them chosen for all limits of the table";
  at.problems.push({ column, found, allowed });
}

function addLevel(at: Reading, role: "confidence" | "sigmas"): void {
  const given = cellOf(at, role);
  if (given === null) return;
  const number = numberCell(given.cell, at.plan.mark);
  const isPercent = given.slot.match.unit === "%" && typeof number === "number";
  at.fields[role] = isPercent ? number / 100 : number;
}

/** A confidence or a number of sigmas belongs to limits; beside a value it says something else. */
function dropLevels(at: Reading): void {
  for (const role of ["confidence", "sigmas"] as const) {
    const given = cellOf(at, role);
    if (given === null) continue;
    const name = given.slot.column.name;
    at.extra[name] = numberCell(given.cell, at.plan.mark);
    at.notes.push(`Column ${name} says nothing of a value that is no limit, and is kept as extra.`);
  }
}

function addWords(at: Reading): void {
  const unit = cellOf(at, "unit");
  const words = { noise: String, status: statusCell, setAside: setAsideCell };
  for (const [role, read] of Object.entries(words)) {
    const given = cellOf(at, role);
    const value = given === null ? null : read(given.cell);
    if (value !== null) at.fields[role] = value;
  }
  const source = cellOf(at, "source");
  if (source !== null) at.fields["source"] = sourceCell(source.cell, source.slot.column.name);
  if (unit === null) {
    if (at.part.unit !== null && at.fields["value"] !== undefined) at.fields["unit"] = at.part.unit;
    return;
  }
  const text = String(unit.cell);
  if (at.part.unit !== null && text !== at.part.unit) {
    const found = `the unit ${text} under a header in ${at.part.unit}`;
    const allowed = "the header's unit, or none in the header";
    at.problems.push({ column: unit.slot.column.name, found, allowed });
  }
  at.fields["unit"] = text;
}

function lacksValue(at: Reading, flag: Flag | null): void {
  if (["value", "count", "occurred"].some((role) => at.fields[role] !== undefined)) return;
  if (at.problems.length > 0) return;
  const slot =
    at.part.slots.get("value") ?? at.part.slots.get("count") ?? at.part.slots.get("occurred");
  const beside = flag === null ? "an uncertainty" : "a limit flag";
  const found = `nothing, beside ${beside}`;
  at.problems.push({ column: slot?.column.name ?? null, found, allowed: "a value" });
}
