import { unitOf } from "@weighhouse/campaign/units";
import { readNumber } from "./number-cells";
import type { RawColumn } from "./raw-table";
import type { CsvRecord } from "./records";
import { readTimeWords } from "./time-words";

const NO_UNIT = new Set(["", "-", "--", "none", "n/a"]);
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
  return units.map((unit) => (NO_UNIT.has(unit.toLowerCase()) ? null : unit));
}

function holdsNumbers(records: readonly CsvRecord[], index: number): boolean {
  const cells = records.slice(0, LOOKED_AT).map(({ cells }) => cells[index] ?? "");
  return cells.some((cell) => /^[<>≤≥+\-\u2212]?\s*[\d.,]*\d/.test(cell));
}

/** A line of hyphens under a header, as catalogues in text have it; marks of missing cells are shorter. */
export function isRule({ cells }: CsvRecord): boolean {
  return cells.length > 0 && cells.every((cell) => /^-{3,}$|^={3,}$/.test(cell));
}
