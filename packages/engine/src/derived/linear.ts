import { compileSlots, type Expression } from "@weighhouse/campaign/expression";
import type { Scale } from "@weighhouse/campaign/document";
import { toNatural, toScoringSpace } from "../scoring-space";

/** An expression of inputs, from their scoring spaces to its own. */
export interface Propagated {
  expression: Expression;
  /** Names in the expression, and which input each one is. */
  names: readonly string[];
  inputOf: readonly number[];
  /** Of the inputs. */
  scales: readonly Scale[];
  scale: Scale;
  period: number;
}

export interface Linearised {
  value: number;
  /** J_j = d value / d input_j, in scoring spaces. */
  slopes: number[];
  /** f_ij, row by row. */
  curvature: Float64Array;
}

/**
 * Value, slopes and curvature of an expression at its inputs' values, by symbolic derivatives and
 * the chain rule through the scales (n = 10^x has n' = n ln 10).
 *
 * @param inputs in scoring space
 * @returns null where the expression has no value there, or isn't smooth
 */
export function linearise(of: Propagated, inputs: readonly number[]): Linearised | null {
  const { expression, names, inputOf, scales, scale } = of;
  const natural = Float64Array.from(inputOf, (j) => toNatural(inputs[j]!, scales[j]!));
  const stretch = natural.map((value, k) => stretchOf(value, scales[inputOf[k]!]!));
  const n = inputs.length;
  const g = compileSlots(expression, names)(natural);
  const first = new Float64Array(n);
  const second = new Float64Array(n * n);
  names.forEach((name, k) => {
    const i = inputOf[k]!;
    const byName = expression.derivative(name);
    const slope = compileSlots(byName, names)(natural) * stretch[k]!;
    first[i]! += slope;
    if (scales[i] === "log10") second[i * n + i]! += slope * Math.LN10;
    names.forEach((other, l) => {
      const bend = compileSlots(byName.derivative(other), names)(natural);
      second[i * n + inputOf[l]!]! += bend * stretch[k]! * stretch[l]!;
    });
  });
  if (scale === "log10") intoLog10(g, first, second);
  const value = toScoringSpace(g, scale);
  if (![value, ...first, ...second].every(Number.isFinite)) return null;
  return { value, slopes: [...first], curvature: second };
}

/** From derivatives of g to those of log10 g. */
function intoLog10(g: number, first: Float64Array, second: Float64Array): void {
  const n = first.length;
  for (let i = 0; i < n; i += 1) {
    for (let j = 0; j < n; j += 1) {
      const bent = second[i * n + j]! / g - (first[i]! / g) * (first[j]! / g);
      second[i * n + j] = bent / Math.LN10;
    }
  }
  for (let i = 0; i < n; i += 1) first[i]! /= g * Math.LN10;
}

/** d natural / d scored. */
function stretchOf(natural: number, scale: Scale): number {
  return scale === "log10" ? natural * Math.LN10 : 1;
}

/** J C J'. */
export function varianceOf(slopes: readonly number[], covariance: Float64Array): number {
  const n = slopes.length;
  let sum = 0;
  for (let i = 0; i < n; i += 1) {
    for (let j = 0; j < n; j += 1) sum += slopes[i]! * slopes[j]! * covariance[i * n + j]!;
  }
  return Math.max(sum, 0);
}

/** How far the curvature moves the mean: 1/2 sum sum f_ij C_ij. */
export function secondOrderShift(curvature: Float64Array, covariance: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < curvature.length; i += 1) sum += curvature[i]! * covariance[i]!;
  return sum / 2;
}
