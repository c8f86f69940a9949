import type { Observable } from "@weighhouse/campaign/document";
import { conversion, unitOf } from "@weighhouse/campaign/units";
import { plainName } from "./field-names";
import type { TableContext } from "./table-match";

export type Target = { key: string; observable: Observable };

/** What a table's columns can be about. */
export type MatchScope = {
  conditions: Set<string>;
  /** Measurands and observables by their keys. */
  targets: Map<string, Target>;
  /** The same by their names without case and separators: keys and titles that only one has. */
  named: Map<string, Target>;
  /** The observables that values may be of. */
  observables: Observable[];
  /** The rows' measurand, where it is given for all of them. */
  measurand: Target | null;
};

export function matchScope({ document, defaults }: TableContext): MatchScope {
  const byKey = new Map(document.observables.map((one) => [one.key, one]));
  const targets = new Map<string, Target>();
  for (const one of document.observables) targets.set(one.key, { key: one.key, observable: one });
  for (const { key, observable } of document.measurands) {
    const of = byKey.get(observable);
    if (of !== undefined) targets.set(key, { key, observable: of });
  }
  const measurand = targets.get(defaults?.measurand ?? "") ?? null;
  const used = new Set(document.measurands.map(({ observable }) => observable));
  return {
    conditions: new Set(
      document.observables.flatMap(({ conditions }) => conditions.map(({ key }) => key)),
    ),
    targets,
    named: namedTargets(document, targets),
    observables:
      measurand === null
        ? document.observables.filter(({ key }) => used.has(key))
        : [measurand.observable],
    measurand,
  };
}

function namedTargets(
  document: TableContext["document"],
  targets: Map<string, Target>,
): Map<string, Target> {
  const named = new Map<string, Target | null>();
  // Keys before titles, measurands before observables: a title gives way to a key.
  const parts = [...document.measurands, ...document.observables];
  for (const { key } of parts) {
    const plain = plainName(key);
    if (!named.has(plain)) named.set(plain, targets.get(key) ?? null);
  }
  const keys = new Set(named.keys());
  for (const { key, title } of parts) {
    const plain = plainName(title ?? "");
    if (plain === "" || keys.has(plain)) continue;
    named.set(plain, named.has(plain) ? null : (targets.get(key) ?? null));
  }
  return new Map([...named].flatMap(([name, target]) => (target === null ? [] : [[name, target]])));
}

/** Whether a unit, where both are known, is of the observable's dimension. */
export function fitsUnit(unit: string | null, observable: Observable): boolean | null {
  if (unit === null || observable.unit === null) return null;
  if (unit === observable.unit) return true;
  if (unitOf(unit) === null || unitOf(observable.unit) === null) return null;
  return conversion(unit, observable.unit).kind === "factor";
}

/** The field that holds the result of an observable of this scale. */
export function resultField({ scale }: Observable): "value" | "count" | "occurred" {
  if (scale === "count") return "count";
  return scale === "event" ? "occurred" : "value";
}
