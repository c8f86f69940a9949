import { conditionFromTime } from "./conditions";
import type { CampaignDocument, Measurand, Observable, Scale } from "./document";
import { compareInstants, isTime } from "./instants";
import { conversion } from "./units";

/** The measurand that a row falls in, or why there isn't exactly one. */
export type Falling = { measurand: string } | { found: string; allowed: string };

type Row = Readonly<Record<string, unknown>>;
type Declarations = Pick<CampaignDocument, "observables" | "measurands">;

/**
 * Finds the measurand of rows that name none: the one open measurand of the row's observable (of any,
 * where it names none either) whose window holds the time and whose ranges hold the conditions, also
 * those that are computed from time, and to which the kind of result and the unit belong. What a
 * range is about must be known of the row: what can't be told apart isn't guessed.
 *
 * @returns for a row's fields as they were given, before they were checked
 */
export function measurandFinder(document: Declarations): (row: Row) => Falling {
  const observables = new Map(document.observables.map((one) => [one.key, one]));
  const open = document.measurands.filter(({ closed }) => closed === null);
  return (row) => {
    const named = row["observable"] ?? null;
    if (named !== null && !observables.has(String(named))) {
      const known = [...observables.keys()];
      return { found: `the unknown observable ${shown(named)}`, allowed: oneOf(known) };
    }
    const own = open.filter(({ observable }) => named === null || observable === named);
    const fitting = own.filter((one) => fits(row, one, observables.get(one.observable)));
    const [first, second] = fitting;
    if (first !== undefined && second === undefined) return { measurand: first.key };
    const where = described(row, named);
    return first === undefined
      ? { found: `no measurand for ${where}`, allowed: oneOf(own.map(rangeOf)) }
      : {
          found: `several measurands for ${where}: ${oneOf(fitting.map(({ key }) => key))}`,
          allowed: "one of them by name, or what tells them apart",
        };
  };
}

/** The unit that a measurand's values are in where they name none. */
export function unitFinder(document: Declarations): (measurand: string) => string | null {
  const units = new Map(document.observables.map(({ key, unit }) => [key, unit]));
  const ofMeasurands = new Map(
    document.measurands.map(({ key, observable }) => [key, units.get(observable) ?? null]),
  );
  return (measurand) => ofMeasurands.get(measurand) ?? null;
}

function fits(row: Row, measurand: Measurand, observable: Observable | undefined): boolean {
  if (observable === undefined || !isResultOf(row, observable.scale)) return false;
  const { unit } = row;
  if (typeof unit === "string" && observable.unit !== null && unit !== observable.unit) {
    if (conversion(unit, observable.unit).kind === "other-dimension") return false;
  }
  return isInWindow(row, measurand) && isInRanges(row, measurand, observable);
}

function isResultOf(row: Row, scale: Scale): boolean {
  const has = (name: string) => (row[name] ?? null) !== null;
  if (scale === "event") return has("occurred");
  return scale === "count" ? has("count") : has("value");
}

/** Window ends are inclusive; an undated row is in no window that has an end. */
function isInWindow(row: Row, { window: { from, to } }: Measurand): boolean {
  if (from === null && to === null) return true;
  const { observedAt: at } = row;
  if (typeof at !== "string" || !isTime(at)) return false;
  return (
    (from === null || compareInstants(at, from) >= 0) &&
    (to === null || compareInstants(at, to) <= 0)
  );
}

function isInRanges(row: Row, { where }: Measurand, observable: Observable): boolean {
  const { conditions: given, observedAt: at } = row;
  const conditions = (typeof given === "object" && given !== null ? given : {}) as Row;
  const known = new Map(observable.conditions.map((one) => [one.key, one]));
  if (Object.keys(conditions).some((name) => !known.has(name))) return false;
  return Object.entries(where).every(([name, [lower, upper]]) => {
    const condition = known.get(name);
    const computed =
      condition === undefined || typeof at !== "string" || !isTime(at)
        ? null
        : conditionFromTime(condition, at);
    const value = conditions[name] ?? computed;
    if (typeof value !== "number" || Number.isNaN(value)) return false;
    return (lower === null || value >= lower) && (upper === null || value <= upper);
  });
}

function described(row: Row, observable: unknown): string {
  const { observedAt, conditions } = row;
  const given = typeof conditions === "object" && conditions !== null ? conditions : {};
  const words = [
    observable === null ? "a row of no named observable" : shown(observable),
    observedAt === null || observedAt === undefined ? "without a time" : `at ${shown(observedAt)}`,
    ...Object.entries(given).map(([name, value]) => `${name} ${shown(value)}`),
  ];
  return words.join(", ");
}

/** What falls in it, for who looks for the row's fault. */
function rangeOf({ key, window: { from, to }, where }: Measurand): string {
  const ranges = Object.entries(where).map(
    ([name, [lower, upper]]) => `${name} ${lower ?? "any"} to ${upper ?? "any"}`,
  );
  if (from !== null || to !== null) ranges.unshift(`${from ?? "any time"} to ${to ?? "any time"}`);
  return ranges.length === 0 ? key : `${key} (${ranges.join(", ")})`;
}

const MOST_NAMED = 6;

function oneOf(all: string[]): string {
  if (all.length === 0) return "none: no open measurand of it is declared";
  const more = all.length > MOST_NAMED ? ` and ${all.length - MOST_NAMED} more` : "";
  return all.slice(0, MOST_NAMED).join("; ") + more;
}

function shown(value: unknown): string {
  const text = typeof value === "string" ? value : (JSON.stringify(value) ?? "nothing");
  return text.length > 80 ? `${text.slice(0, 80)}…` : text;
}
