import { assign, has, open } from "./assignment";
import type { Assignment } from "./assignment";
import { plainName } from "./field-names";
import { fitsUnit, resultField } from "./match-scope";
import type { MatchScope } from "./match-scope";
import { partNames } from "./part-names";
import { ucdField } from "./ucd-fields";

/** The columns of results: by the names of what is measured, by UCD and unit, or by their errors. */
export function assignValues(at: Assignment): void {
  const { scope } = at;
  if (has(at, "value", "count", "occurred")) return;
  const single = scope.measurand ?? null;
  const named = open(at).flatMap(([column, index]) => {
    const target = scope.named.get(plainName(column.name));
    return target === undefined ? [] : [{ index, target }];
  });
  const rowsSay = single !== null || has(at, "measurand", "observable");
  for (const { index, target } of named) {
    const field = resultField(target.observable);
    const isPlain = named.length === 1 && (rowsSay || isOnly(at.scope, target.key));
    assign(at, index, isPlain ? field : `${field}@${target.key}`, "name");
  }
  if (named.length === 0) assignByUcdOrUnit(at, rowsSay);
}

/** Where a campaign has one quantity, nothing has to say that a value is of it. */
function isOnly({ observables }: MatchScope, key: string): boolean {
  return observables.length === 1 && observables[0]!.key === key;
}

/** Names that say what unit a column is in (common practice). */
const MAGNITUDES = new Set(["mag", "magnitude"]);

function assignByUcdOrUnit(at: Assignment, rowsSay: boolean): void {
  const { observables } = at.scope;
  const stems = new Set(
    open(at).flatMap(([{ name }]) => partNames(name).map(({ stem }) => plainName(stem))),
  );
  const isPart = (name: string) =>
    partNames(name).some(
      ({ stem }) =>
        stem !== "" && at.table.columns.some((one) => plainName(one.name) === plainName(stem)),
    );
  const candidates = open(at).flatMap(([column, index]) => {
    const { name, ucd, kind } = column;
    const unit = column.unit ?? (MAGNITUDES.has(plainName(name)) ? "mag" : null);
    if (isPart(name) || kind === "text" || kind === "boolean" || kind === "time") return [];
    const said = ucdField(ucd);
    if (said !== null && said.kind !== "value") return [];
    const fits = observables.filter((one) => fitsUnit(unit, one) !== false);
    const sure = fits.filter((one) => fitsUnit(unit, one) === true);
    const paired = stems.has(plainName(name));
    if (said === null && sure.length === 0 && !paired) return [];
    const why =
      said !== null ? ("ucd" as const) : sure.length > 0 ? ("unit" as const) : ("synonym" as const);
    return fits.length === 0 ? [] : [{ index, why, paired, of: sure.length > 0 ? sure : fits }];
  });
  // A column with an error of its own is a value before one without.
  const withErrors = candidates.filter(({ paired }) => paired);
  const values = withErrors.length > 0 ? withErrors : candidates;
  const [only] = values;
  if (
    values.length === 1 &&
    only !== undefined &&
    (rowsSay || at.scope.observables.length === 1 || only.of.length > 1)
  ) {
    assign(at, only.index, resultField(only.of[0]!), only.why);
    return;
  }
  if (rowsSay) return;
  for (const { index, why, of } of values) {
    const [observable] = of;
    const others = values.filter((one) => one.index !== index && one.of.includes(observable!));
    if (of.length !== 1 || observable === undefined || others.length > 0) continue;
    assign(at, index, `${resultField(observable)}@${observable.key}`, why);
  }
}
