import { unitOf } from "@weighhouse/campaign/units";
import { isTimeName } from "./field-names";
import { readTimeWords } from "./time-words";
import { plainColumn } from "./raw-table";
import type { RawColumn } from "./raw-table";

/** Words in parentheses behind a name that are no unit: they say which of a value's numbers it is. */
const NO_UNIT =
  /^(?:err(?:or)?|sigma|std|unc(?:ertainty)?|upper|lower|plus|minus|[+-]|min|max|start|end|mid|flag|limit|\d+)$/i;

/** Columns from the cells of a header line: `flux [Jy]` and `flux (Jy)` are a name and a unit. */
export function headerColumns(cells: readonly string[]): RawColumn[] {
  const parted = cells.map(partUnit);
  const names = new Map<string, number>();
  for (const { name } of parted) names.set(name, (names.get(name) ?? 0) + 1);
  return parted.map(({ name, unit }, index) => {
    const text = cells[index] ?? "";
    if (text === "") return plainColumn(`column ${index + 1}`);
    const twice = (names.get(name) ?? 0) > 1 && name !== text;
    return withUnit(plainColumn(twice ? text : name), unit);
  });
}

/** A unit's text, or what stands in its place: a time scale or format. */
export function withUnit(column: RawColumn, unit: string | null): RawColumn {
  if (unit === null) return column;
  const isTime = isTimeName(column.name) || readTimeWords(column.name) !== null;
  // TT would be a teratesla.
  const words = isTime || unitOf(unit) === null ? readTimeWords(unit) : null;
  if (words === null) return { ...column, unit };
  return {
    ...column,
    timeScale: words.scale,
    timeFormat: words.format,
    timeOrigin: words.origin,
    timeReference: words.reference,
  };
}

function partUnit(text: string): { name: string; unit: string | null } {
  const match = /^(.*?\S)\s*(?:\[([^\]]*)\]|\(([^)]*)\))$/.exec(text);
  const unit = (match?.[2] ?? match?.[3] ?? "").trim();
  const inParentheses = match?.[3] !== undefined;
  if (match === null || text.startsWith("extra.") || (inParentheses && NO_UNIT.test(unit))) {
    return { name: text, unit: null };
  }
  return { name: match[1] ?? "", unit: unit === "" ? null : unit };
}
