import { below } from "../pointer";
import { legible } from "./reading";
import type { Reading } from "./reading";

/** Correlations between measurements: both known, not one with itself, each pair once. */
export function checkCorrelations(reading: Reading): void {
  const correlations = reading.form.correlations ?? [];
  if (correlations.length === 0) return;
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
