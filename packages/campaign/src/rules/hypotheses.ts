import type { Ensemble, Hypothesis, Prior, Table } from "../document";
import type { Legible } from "../form";
import { below } from "../pointer";
import { checkDefinite, checkPair, isPair } from "./correlations";
import { checkReserved } from "./declarations";
import { checkPredictions } from "./predictions";
import { legible } from "./reading";
import type { Reading } from "./reading";

/** Hypotheses: their parameters, tables, ensemble, predictions and what these refer to. */
export function checkHypotheses(reading: Reading): void {
  const predictable = reading.predictable();
  for (const [index, hypothesis] of legible(reading.form.hypotheses)) {
    const pointer = below("/hypotheses", index);
    reading.refer(below(pointer, "team"), hypothesis.team, reading.teams, "team");
    checkNames(reading, hypothesis, pointer);
    checkParameters(reading, hypothesis, pointer);
    checkTables(reading, hypothesis, pointer);
    checkEnsemble(reading, hypothesis.ensemble, below(pointer, "ensemble"));
    checkWithheld(reading, hypothesis, pointer, predictable);
    checkPredictions(reading, hypothesis, pointer, predictable);
    checkToleranceCorrelations(reading, hypothesis, pointer);
  }
}

/** Parameters, ensemble columns and tables are seen by the same expressions: one name each. */
function checkNames(reading: Reading, hypothesis: Legible<Hypothesis>, pointer: string): void {
  const earlier = new Set<string>();
  for (const [index, { key }] of legible(hypothesis.parameters)) {
    const at = below(pointer, "parameters", index, "key");
    reading.distinct(at, key, earlier, "the parameter");
    checkReserved(reading, key, at);
  }
  for (const name of Object.keys(hypothesis.ensemble?.columns ?? {})) {
    const at = below(pointer, "ensemble", "columns", name);
    reading.distinct(at, name, earlier, "the name");
    checkReserved(reading, name, at);
  }
  for (const [index, { key }] of legible(hypothesis.tables)) {
    const at = below(pointer, "tables", index, "key");
    reading.distinct(at, key, earlier, "the name");
    checkReserved(reading, key, at);
  }
}

function checkParameters(reading: Reading, hypothesis: Legible<Hypothesis>, pointer: string): void {
  for (const [index, { prior }] of legible(hypothesis.parameters)) {
    if (prior !== undefined)
      checkWidth(reading, prior, below(pointer, "parameters", index, "prior"));
  }
}

/** A prior has a width (but `fixed`): nothing can be learned of a parameter without one. */
function checkWidth(reading: Reading, prior: Legible<Prior>, pointer: string): void {
  if (prior.family !== "uniform" && prior.family !== "loguniform") return;
  const { lower, upper } = prior;
  if (lower === undefined || upper === undefined || lower < upper) return;
  const allowed = `a number above ${lower}; a prior without a width is fixed`;
  reading.refuse(below(pointer, "upper"), "out-of-range", String(upper), allowed);
}

function checkTables(reading: Reading, hypothesis: Legible<Hypothesis>, pointer: string): void {
  for (const [index, table] of legible(hypothesis.tables)) {
    checkTable(reading, table, below(pointer, "tables", index));
  }
}

function checkTable(reading: Reading, table: Legible<Table>, pointer: string): void {
  const { at: axes, values, in: names } = table;
  if (axes === undefined) return;
  if (names !== undefined && names.length !== axes.length) {
    const found = `${axes.length} axes for ${names.length} names`;
    reading.refuse(below(pointer, "at"), "contradiction", found, "an axis for each name of in");
  }
  for (const [index, axis] of legible(axes)) {
    const fault = axis.findIndex((x, i) => i > 0 && !(x! > axis[i - 1]!));
    if (fault < 0 || axis.includes(undefined)) continue;
    const place = below(pointer, "at", index, fault);
    reading.refuse(place, "out-of-range", String(axis[fault]), `a number above ${axis[fault - 1]}`);
  }
  if (values === undefined) return;
  const [first, second] = axes;
  const place = below(pointer, "values");
  if (first !== undefined && values.length !== first.length) {
    const found = `a list of ${values.length}`;
    reading.refuse(place, "contradiction", found, `one for each of the ${first.length} points`);
    return;
  }
  for (const [index, row] of values.entries()) checkRow(reading, row, second, below(place, index));
}

function checkRow(
  reading: Reading,
  row: unknown,
  axis: readonly unknown[] | undefined,
  pointer: string,
): void {
  if (axis === undefined) {
    if (!Array.isArray(row)) return;
    reading.refuse(pointer, "wrong-type", "a list", "a number, with one axis");
  } else if (!Array.isArray(row)) {
    reading.refuse(pointer, "wrong-type", "no list", "a row of numbers, with two axes");
  } else if (row.length !== axis.length) {
    const allowed = `one for each of the ${axis.length} points`;
    reading.refuse(pointer, "contradiction", `a list of ${row.length}`, allowed);
  }
}

function checkEnsemble(
  reading: Reading,
  ensemble: Legible<Ensemble> | null | undefined,
  pointer: string,
): void {
  if (ensemble === null || ensemble === undefined) return;
  const columns = Object.entries(ensemble.columns ?? {});
  if (ensemble.columns !== undefined && columns.length === 0) {
    reading.refuse(below(pointer, "columns"), "missing", "no column", "one or more columns");
  }
  const rows = columns[0]?.[1]?.length;
  if (rows === undefined) return;
  for (const [name, column] of columns) {
    if (column === undefined || column.length === rows) continue;
    const found = `a list of ${column.length}`;
    const place = below(pointer, "columns", name);
    reading.refuse(place, "contradiction", found, `${rows}, as in ${columns[0]![0]}`);
  }
  const { weights } = ensemble;
  if (weights === null || weights === undefined) return;
  const place = below(pointer, "weights");
  if (weights.length !== rows) {
    reading.refuse(place, "contradiction", `a list of ${weights.length}`, `${rows}, one a row`);
  }
  if (weights.every((weight) => weight === 0)) {
    reading.refuse(place, "out-of-range", "only zeros", "at least one weight above 0");
  }
}

function checkWithheld(
  reading: Reading,
  hypothesis: Legible<Hypothesis>,
  pointer: string,
  predictable: ReadonlyMap<string, unknown>,
): void {
  const earlier = new Set<string>();
  for (const [index, key] of legible(hypothesis.withheld)) {
    const at = below(pointer, "withheld", index);
    reading.refer(at, key, predictable, "measurand");
    reading.distinct(at, key, earlier, "the measurand");
  }
}

/** Only offsets in common have a correlation: normal, and not drawn for each measurement. */
function checkToleranceCorrelations(
  reading: Reading,
  hypothesis: Legible<Hypothesis>,
  pointer: string,
): void {
  const tolerances = new Map(
    [...legible(hypothesis.predictions)].map(([, one]) => [one.measurand, one.tolerance]),
  );
  const pairs = new Set<string>();
  const before = reading.problems.length;
  for (const [index, correlation] of legible(hypothesis.toleranceCorrelations)) {
    const at = below(pointer, "toleranceCorrelations", index);
    for (const end of ["a", "b"] as const) {
      const key = correlation[end];
      if (key === undefined) continue;
      reading.refer(below(at, end), key, tolerances as ReadonlyMap<string, unknown>, "prediction");
      const tolerance = tolerances.get(key);
      if (tolerance === undefined) continue;
      if (tolerance?.family === "normal" && tolerance.sharing === "common") continue;
      const found = `the prediction of ${key}`;
      const allowed = "one with a normal tolerance whose sharing is common";
      reading.refuse(below(at, end), "not-applicable", found, allowed);
    }
    checkPair(reading, { ...correlation, pointer: at, pairs });
  }
  if (reading.problems.length > before) return;
  const between = [...legible(hypothesis.toleranceCorrelations)].map(([, one]) => one);
  checkDefinite(reading, below(pointer, "toleranceCorrelations"), between.filter(isPair));
}
