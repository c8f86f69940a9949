import { drawNamed } from "../combination/level-rows";
import type { Loading } from "../readings";
import type { DerivedVector, Workspace } from "../workspace";
import { derivedValue, type DerivedValue } from "./derived";
import { inputCovariance } from "./inputs";

/**
 * The derived values that can be computed, as one vector: with the covariance J C J' of their
 * inputs' own noises, and the inputs' shared errors carried through J. Two ratios with one
 * denominator are nearly one measurement.
 */
export function derivedVector(workspace: Workspace): DerivedVector {
  const measurands: number[] = [];
  const values: DerivedValue[] = [];
  workspace.frame.measurands.forEach(({ derived }, measurand) => {
    const value = derived === null ? null : derivedValue(workspace, measurand);
    if (value === null) return;
    measurands.push(measurand);
    values.push(value);
  });
  const n = values.length;
  const covariance = new Float64Array(n * n);
  values.forEach((a, i) => {
    values.forEach((b, j) => (covariance[i * n + j] = ownCovariance(workspace, a, b)));
  });
  return {
    measurands,
    values: Float64Array.from(values, ({ combination }) => combination.value),
    covariance,
    loadings: values.map(loadingsOf),
  };
}

function ownCovariance({ frame }: Workspace, a: DerivedValue, b: DerivedValue): number {
  if (a.slopes === null || b.slopes === null) return a === b ? a.combination.sd ** 2 : 0;
  let sum = 0;
  for (const [i, one] of a.inputs.entries()) {
    for (const [j, other] of b.inputs.entries()) {
      sum += a.slopes[i]! * b.slopes[j]! * inputCovariance(frame, one, other).own;
    }
  }
  return sum;
}

function loadingsOf({ inputs, slopes }: DerivedValue): Loading[] {
  const byDraw = new Map<string, number>();
  if (slopes === null) return [];
  inputs.forEach(({ errors }, j) => {
    for (const [draw, loading] of errors.loadings) {
      byDraw.set(draw, (byDraw.get(draw) ?? 0) + slopes[j]! * loading);
    }
  });
  const loadings: Loading[] = [];
  for (const [draw, value] of byDraw) {
    if (value !== 0) loadings.push({ ...drawNamed(draw), value, relative: false });
  }
  return loadings;
}
