import { below } from "../pointer";
import { indefiniteBlocks } from "./definite";
import type { Pair } from "./definite";
import { legible, oneOf } from "./reading";
import type { Reading } from "./reading";

/**
 * Correlations between measurements: both known, not one with itself, each pair once, and such as
 * there can be together.
 */
export function checkCorrelations(reading: Reading): void {
  const correlations = reading.form.correlations ?? [];
  if (correlations.length === 0) return;
  const before = reading.problems.length;
  const known = new Map<string, boolean>();
  for (const [, measurement] of legible(reading.form.measurements)) {
    const { id, occurred, count } = measurement;
    if (id !== undefined) known.set(id, occurred === null && count === null);
  }
  const pairs = new Set<string>();
  for (const [index, correlation] of legible(correlations)) {
    const pointer = below("/correlations", index);
    for (const end of ["a", "b"] as const) {
      const id = correlation[end];
      if (id === undefined) continue;
      if (!known.has(id)) {
        const found = `the unknown measurement ${id}`;
        reading.refuse(below(pointer, end), "unknown-key", found, "the id of a measurement");
      } else if (known.get(id) === false) {
        const found = `the event or count ${id}`;
        reading.refuse(below(pointer, end), "not-applicable", found, "a measurement with a value");
      }
    }
    checkPair(reading, { ...correlation, pointer, pairs });
  }
  if (reading.problems.length > before) return;
  const counted = countedIds(reading);
  const between = [...legible(correlations)].map(([, one]) => one);
  checkDefinite(
    reading,
    "/correlations",
    between.filter(isPair).filter(({ a, b }) => {
      return counted.has(a) && counted.has(b);
    }),
  );
}

/** What isn't counted correlates with nothing. */
function countedIds(reading: Reading): Set<string> {
  const counted = new Set<string>();
  for (const [, { id, measurand, setAside }] of legible(reading.form.measurements)) {
    if (id === undefined || setAside !== null || measurand === undefined) continue;
    if (reading.measurands.get(measurand)?.closed === null) counted.add(id);
  }
  return counted;
}

export function isPair(one: Partial<Pair>): one is Pair {
  return one.a !== undefined && one.b !== undefined && one.coefficient !== undefined;
}

/** Blocks whose correlations can't all be so together are named. */
export function checkDefinite(reading: Reading, pointer: string, pairs: readonly Pair[]): void {
  for (const names of indefiniteBlocks(pairs)) {
    const found = `correlations of ${oneOf(names, "block")} that can't be so together`;
    reading.refuse(pointer, "not-positive-definite", found, "a matrix that is positive definite");
  }
}

/** A pair of two different ones, named once in either order. */
export function checkPair(
  reading: Reading,
  pair: { a?: string | undefined; b?: string | undefined; pointer: string; pairs: Set<string> },
): void {
  const { a, b, pointer, pairs } = pair;
  if (a === undefined || b === undefined) return;
  if (a === b) {
    reading.refuse(below(pointer, "b"), "contradiction", `${b} with itself`, "two different ones");
    return;
  }
  const both = a < b ? `${a} ${b}` : `${b} ${a}`;
  if (pairs.has(both)) {
    reading.refuse(pointer, "duplicate", `${a} and ${b} a second time`, "each pair once");
  }
  pairs.add(both);
}
