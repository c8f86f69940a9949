import type { Observable } from "@weighhouse/campaign/document";
import { conversion } from "@weighhouse/campaign/units";
import { fitsUnit } from "./match-scope";
import type { MatchScope } from "./match-scope";
import type { ColumnMatch } from "./table-match";

/** Uncertainties, which are brought into their value's unit. */
const WIDTHS = new Set(["sd", "plus", "minus"]);

/** The match with what its unit leads to: another field, a conversion in words, or a problem. */
export function unitMatch(
  match: ColumnMatch,
  matches: readonly ColumnMatch[],
  scope: MatchScope,
): ColumnMatch {
  const { unit, field } = match;
  if (match.problem !== null || unit === null) return match;
  const [role = "", target = ""] = field.split("@");
  if (WIDTHS.has(role)) return widthMatch(match, role, valueUnit(matches, target));
  if (role === "value") return valueMatch(match, observableOf(target, scope));
  if (role.startsWith("conditions.")) return conditionMatch(match, scope);
  return match;
}

/** The unit of one result's value, as its own column says, or else one of its uncertainties. */
export function valueUnit(matches: readonly ColumnMatch[], target: string): string | null {
  const inGroup = (role: string) =>
    matches.find(({ field }) => field === (target === "" ? role : `${role}@${target}`));
  const own = inGroup("value")?.unit ?? null;
  if (own !== null) return own;
  const widths = [...WIDTHS].map((role) => inGroup(role)?.unit ?? null);
  return widths.find((unit) => unit !== null && unit !== "dex") ?? null;
}

function observableOf(
  target: string,
  { targets, measurand, observables }: MatchScope,
): Observable | null {
  if (target !== "") return targets.get(target)?.observable ?? null;
  if (measurand !== null) return measurand.observable;
  return observables.length === 1 ? observables[0]! : null;
}

function widthMatch(match: ColumnMatch, role: string, value: string | null): ColumnMatch {
  const unit = match.unit!;
  if (role === "sd" && unit === "dex" && value !== "dex") {
    return { ...match, field: match.field.replace(/^sd/, "sdDex"), unit: null };
  }
  if (value === null || value === unit) return match;
  const found = conversion(unit, value);
  if (found.kind === "factor") {
    return {
      ...match,
      conversion: `${unit} to the value's ${value}: × ${factorText(found.factor)}`,
    };
  }
  const problem = {
    found: `the unit ${unit} beside ${value}`,
    allowed: "the value's unit, or one of its dimension",
  };
  return { ...match, problem };
}

function valueMatch(match: ColumnMatch, observable: Observable | null): ColumnMatch {
  const unit = match.unit!;
  if (observable === null || observable.unit === null || unit === observable.unit) return match;
  const fits = fitsUnit(unit, observable);
  if (fits === null) return match;
  if (!fits) {
    const allowed = `${observable.unit}, the unit of ${observable.key}, or one of its dimension`;
    return { ...match, problem: { found: `the unit ${unit}`, allowed } };
  }
  const found = conversion(unit, observable.unit);
  if (found.kind !== "factor") return match;
  const offset = found.offset === 0 ? "" : ` + ${factorText(found.offset)}`;
  const text = `${unit} to ${observable.unit} when it is counted: × ${factorText(found.factor)}${offset}`;
  return { ...match, conversion: text };
}

function conditionMatch(match: ColumnMatch, { observables }: MatchScope): ColumnMatch {
  const unit = match.unit!;
  const key = match.field.slice("conditions.".length);
  const wanted = new Set(
    observables.flatMap(({ conditions }) =>
      conditions.filter((one) => one.key === key).map((one) => one.unit),
    ),
  );
  const [only] = wanted;
  if (wanted.size !== 1 || only === undefined || only === unit) return match;
  const found = only === null ? null : conversion(unit, only);
  if (found?.kind === "factor") {
    const offset = found.offset === 0 ? "" : ` + ${factorText(found.offset)}`;
    return { ...match, conversion: `${unit} to ${only}: × ${factorText(found.factor)}${offset}` };
  }
  const problem = { found: `${key} in ${unit}`, allowed: only ?? "a condition without a unit" };
  return { ...match, problem };
}

function factorText(factor: number): string {
  return String(Number(factor.toPrecision(12)));
}
