import type { Observable } from "@weighhouse/campaign/document";
import { conversion } from "@weighhouse/campaign/units";
import type { DraftPlan, Slot } from "./draft-plan";
import type { RawCell } from "./raw-table";
import type { RowProblem } from "./table";

export type GivenCondition = { name: string; slot: Slot; value: RawCell };

/**
 * A draft's conditions: those that its observable declares, in the units that it declares them in.
 * Others, which another quantity in the row has, are kept as extra.
 *
 * @param observable null where nothing says yet what was measured: then only a unit that all agree on is taken
 */
export function addConditions(
  draft: Record<string, unknown>,
  given: readonly GivenCondition[],
  { plan, observable }: { plan: DraftPlan; observable: Observable | null },
): RowProblem[] {
  const problems: RowProblem[] = [];
  const conditions: Record<string, RawCell> = {};
  let extra: Record<string, unknown> | null = null;
  for (const { name, slot, value } of given) {
    const observables = observable === null ? plan.scope.observables : [observable];
    const units = new Set<string | null>();
    for (const one of observables) {
      for (const { key, unit } of one.conditions) if (key === name) units.add(unit);
    }
    const [wanted = null] = units;
    if (units.size === 0) {
      // Drafts of one row share what the row says: a copy for this one.
      extra ??= { ...(draft["extra"] as object) };
      addExtra({ extra }, extraName(slot), value);
    } else if (units.size > 1 && slot.match.unit !== null) {
      const found = `${name} in ${slot.match.unit}, for a quantity that isn't known yet`;
      const allowed = "a measurand or an observable in the row";
      problems.push({ column: slot.column.name, found, allowed });
    } else {
      conditions[name] = converted(value, slot.match.unit, wanted);
    }
  }
  if (extra !== null) draft["extra"] = extra;
  if (Object.keys(conditions).length > 0) draft["conditions"] = conditions;
  return problems;
}

function converted(value: RawCell, unit: string | null, wanted: string | null): RawCell {
  if (unit === null || wanted === null || unit === wanted || typeof value !== "number") {
    return value;
  }
  const found = conversion(unit, wanted);
  return found.kind === "factor" ? value * found.factor + found.offset : value;
}

/** An extra keeps its column's name, with the unit that a number is in. */
export function extraName({ column, match }: Slot): string {
  const name = column.name.replace(/^(?:extra|conditions?)\.(?=.)/, "");
  return match.unit === null ? name : `${name} [${match.unit}]`;
}

/** Without the setter that an assignment to `__proto__` would call: the schema refuses that name. */
export function addExtra(draft: Record<string, unknown>, name: string, value: RawCell): void {
  const extra = (draft["extra"] ??= {}) as Record<string, unknown>;
  Object.defineProperty(extra, name, {
    value,
    enumerable: true,
    writable: true,
    configurable: true,
  });
}
