import type { Hypothesis, Scale, Table } from "../document";
import { compileExpression } from "../expression";
import type { Expression } from "../expression";
import type { Legible } from "../form";
import { below } from "../pointer";
import { conditionRanges } from "./condition-ranges";
import { conditionKeys } from "./measurands";
import type { PredictionPlace } from "./prediction-place";
import { legible } from "./reading";
import type { Reading } from "./reading";
import { hasValueSomewhere } from "./sampling";

/**
 * An expectation that is an expression: it parses, names what it may, sees no name twice, uses no
 * conditions on a constant, and has a value somewhere in its priors' range.
 */
export function checkExpression(reading: Reading, place: PredictionPlace, text: string): void {
  const { hypothesis, observable, measurand, prediction } = place;
  const pointer = below(place.pointer, "expected");
  const conditions = observable === undefined ? new Set<string>() : conditionKeys(observable);
  const own = ownNames(hypothesis);
  const tables = lookUps(hypothesis);
  const constant =
    measurand?.shape === "constant" || reading.derived.has(prediction.measurand ?? "");
  const seen = constant ? own : new Set([...own, ...conditions]);
  const compiled = compileExpression(text, { names: seen, tables });
  // The names of an unreadable part can't be told from unknown ones.
  const telling = observable !== undefined && place.whole;
  if (!compiled.ok) {
    const used = constant ? conditionsUsed(hypothesis, text, conditions) : [];
    if (used.length > 0) {
      const found = `the condition ${used.join(", ")} on a constant`;
      const allowed = "no conditions: a constant has one true value; or the shape curve";
      reading.refuse(pointer, "not-applicable", found, allowed);
      return;
    }
    for (const { found, allowed } of compiled.faults) {
      if (found.startsWith("the unknown name") && !telling) continue;
      reading.refuse(pointer, "bad-expression", found, allowed);
    }
    return;
  }
  const { expression } = compiled;
  if (measurand?.shape === "curve") checkSeenOnce(reading, place, conditions);
  if (!telling || isUnsound(place, expression)) return;
  const used = [...expression.names].filter((name) => conditions.has(name));
  const ranges = conditionRanges(reading, place, used);
  if (!hasValueSomewhere(expression, place, { ranges, effort: reading.effort })) {
    const allowed = "a finite value somewhere between the 1 % and 99 % of the priors";
    const sign = observable?.scale === undefined ? "" : (signs[observable.scale] ?? "");
    const found = "an expression without a value at any parameter tried";
    reading.refuse(pointer, "bad-expression", found, allowed + sign);
  }
}

/** Whether a part that the expression uses is wrong in itself: then its value says nothing. */
function isUnsound(
  { hypothesis, hypothesisPointer, faults }: PredictionPlace,
  { names, tables }: Expression,
): boolean {
  if (faults.length === 0) return false;
  const parts: string[] = [];
  for (const [index, { key }] of legible(hypothesis.parameters)) {
    if (names.has(key ?? "")) parts.push(below(hypothesisPointer, "parameters", index));
  }
  for (const [index, { key }] of legible(hypothesis.tables)) {
    if (tables.has(key ?? "")) parts.push(below(hypothesisPointer, "tables", index));
  }
  if (Object.keys(hypothesis.ensemble?.columns ?? {}).some((column) => names.has(column))) {
    parts.push(below(hypothesisPointer, "ensemble"));
  }
  return faults.some((fault) => parts.some((part) => `${fault}/`.startsWith(`${part}/`)));
}

const signs: Partial<Record<Scale, string>> = {
  log10: ", above 0 on the scale log10",
  count: ", at least 0 on the scale count",
};

/** The conditions that an expression uses; none where it doesn't compile even with them. */
export function conditionsUsed(
  hypothesis: Legible<Hypothesis>,
  text: string,
  conditions: ReadonlySet<string>,
): string[] {
  const names = new Set([...ownNames(hypothesis), ...conditions]);
  const compiled = compileExpression(text, { names, tables: lookUps(hypothesis) });
  return compiled.ok ? [...compiled.expression.names].filter((one) => conditions.has(one)) : [];
}

function ownNames(hypothesis: Legible<Hypothesis>): ReadonlySet<string> {
  const names = new Set(Object.keys(hypothesis.ensemble?.columns ?? {}));
  for (const [, { key }] of legible(hypothesis.parameters)) if (key !== undefined) names.add(key);
  return names;
}

/** Tables by key. One that isn't right has its own problem; here it only has to be known. */
function lookUps(hypothesis: Legible<Hypothesis>): Map<string, Pick<Table, "at" | "values">> {
  const tables = new Map<string, Pick<Table, "at" | "values">>();
  for (const [, { key, at, values }] of legible(hypothesis.tables)) {
    if (key === undefined) continue;
    tables.set(key, { at: (at ?? [[]]) as number[][], values: (values ?? []) as number[] });
  }
  return tables;
}

/** Whether all that expressions name could be read. */
export function isWhole({ parameters, tables, ensemble }: Legible<Hypothesis>): boolean {
  return isLegible(parameters) && isLegible(tables) && isLegible(ensemble);
}

function isLegible(value: unknown): boolean {
  if (value === undefined) return false;
  if (typeof value !== "object" || value === null) return true;
  return Object.values(value).every(isLegible);
}

/** A parameter named like a condition of the curve that an expression describes would hide it. */
function checkSeenOnce(
  reading: Reading,
  { hypothesis, hypothesisPointer, prediction }: PredictionPlace,
  conditions: ReadonlySet<string>,
): void {
  const places = [
    ...[...legible(hypothesis.parameters)].map(
      ([index, { key }]) => [key, below(hypothesisPointer, "parameters", index, "key")] as const,
    ),
    ...Object.keys(hypothesis.ensemble?.columns ?? {}).map(
      (name) => [name, below(hypothesisPointer, "ensemble", "columns", name)] as const,
    ),
    ...[...legible(hypothesis.tables)].map(
      ([index, { key }]) => [key, below(hypothesisPointer, "tables", index, "key")] as const,
    ),
  ];
  for (const [name, pointer] of places) {
    if (name === undefined || !conditions.has(name)) continue;
    // Several predictions may see the same pair; it is one mistake.
    if (reading.problems.some((one) => one.pointer === pointer && one.code === "duplicate"))
      continue;
    const found = `the name ${name}, also a condition of ${prediction.measurand ?? "the curve"}`;
    reading.refuse(pointer, "duplicate", found, "a name of its own");
  }
}
