import { unitOf } from "@weighhouse/campaign/units";
import { readNumber } from "./number-cells";
import type { RawColumn } from "./raw-table";
import type { CsvRecord } from "./records";
import { readTimeWords } from "./time-words";

const NO_UNIT = new Set(["", "-", "--", "none", "n/a"]);
/** What catalogues name in a unit's place for texts and dates. */
const KINDS = /^(?:date|datetime|time|text|string|char|"?[ymdhms:\-/ ]+"?)$/i;
/** Rows looked at behind it: a column with a unit holds numbers. */
const LOOKED_AT = 50;

/**
 * The units of a row below the header (common practice), or null where it may be anything else:
 * every cell is a unit or empty, one at least a unit that is known and no number, no column has a
 * unit in the header already, and below a unit stand numbers.
 */
export function readUnitsRow(
  columns: readonly RawColumn[],
  records: readonly CsvRecord[],
): (string | null)[] | null {
  const [first, ...others] = records;
  // Between a header and a ruled line nothing else stands.
  const isSure = others[0] !== undefined && isRule(others[0]) && !isRule(first!);
  if (isSure && first?.cells.length === columns.length) return first.cells.map(unitOfCell);
  if (first === undefined || first.cells.length !== columns.length || others.length === 0)
    return null;
  if (columns.some(({ unit }) => unit !== null)) return null;
  const units = first.cells.map((cell) => cell.replace(/^[[(](.*)[\])]$/, "$1").trim());
  let known = 0;
  for (const [index, unit] of units.entries()) {
    if (NO_UNIT.has(unit.toLowerCase())) continue;
    const isNumber = readNumber(unit, "point") !== null;
    if (isNumber && unit !== "1") return null;
    if (unitOf(unit) === null && readTimeWords(unit) === null) return null;
    if (isNumber || unitOf(unit) === null) continue;
    if (!holdsNumbers(others, index)) return null;
    known += 1;
  }
  if (known === 0) return null;
  return units.map(unitOfCell);
}

function unitOfCell(cell: string): string | null {
  const unit = cell.replace(/^[[(](.*)[\])]$/, "$1").trim();
  if (NO_UNIT.has(unit.toLowerCase())) return null;
  return unitOf(unit) === null && KINDS.test(unit) ? null : unit;
}

function holdsNumbers(records: readonly CsvRecord[], index: number): boolean {
  const cells = records.slice(0, LOOKED_AT).map(({ cells }) => cells[index] ?? "");
  return cells.some((cell) => /^[<>≤≥+\-\u2212]?\s*[\d.,]*\d/.test(cell));
}

/** A line of hyphens under a header, as wide as its columns; marks of missing cells are shorter. */
export function isRule({ cells }: CsvRecord): boolean {
  return cells.every((cell) => /^(?:-+|=+)$/.test(cell)) && cells.some((cell) => cell.length >= 3);
}
