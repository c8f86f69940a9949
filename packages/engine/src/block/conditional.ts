import { asymmetryFactor } from "./asymmetric";
import type { Eliminated } from "./elimination";
import { tailAt, type FixedDesign } from "./fixed-design";
import { settle } from "./fixed-point";
import type { Layout } from "./layout";
import { ASYMMETRIC, FACTOR } from "./problem";
import type { Workbench } from "./workbench";
import { wrapDifference } from "./wrap";

/** The Gaussian rows and priors at given outer values, with closed-form unknowns gone. */
export interface Conditional {
  /**
   * ln of all but the tail: with |R t - q|^2 the tail's squares, without its rss,
   * the integrand is exp(ln - |R t - q|^2 / 2), over flat unknowns and over normal ones, each of
   * which brings a 1 / sqrt(2 pi).
   */
  ln: number;
  eliminated: Eliminated;
  /** What is expected of every row before the linear unknowns, on the observed one's turn. */
  base: Float64Array;
}

const LN_2PI = 1.8378770664093453;

/** Fills the bench with what is expected; false where the likelihood is zero. */
export function evaluateRows(
  { layout, evaluated, state }: Workbench,
  outer: Float64Array,
  scenario: number,
): boolean {
  const { problem } = layout;
  if (!problem.evaluate(outer, scenario, evaluated)) return false;
  const { observed, period, count, kind } = problem.rows;
  const { base } = evaluated;
  for (let i = 0; i < count; i += 1) {
    const residual = observed[i]! - base[i]!;
    if (!Number.isFinite(base[i]!)) return false;
    const turns = period !== null && period[i] !== 0 && kind[i] !== FACTOR;
    if (!turns) state.residual[i] = residual;
    else {
      state.residual[i] = wrapDifference(residual, period[i]!);
      base[i] = observed[i]! - state.residual[i]!;
    }
  }
  return evaluated.columns.every((column) => column.every(Number.isFinite));
}

/**
 * @returns null where the likelihood is zero; the rows whose covariance is singular
 */
export function conditionalAt(
  bench: Workbench,
  outer: Float64Array,
  scenario: number,
): Conditional | null | { singular: number[] } {
  if (!evaluateRows(bench, outer, scenario)) return null;
  const { layout, state } = bench;
  const settled = settle(bench);
  if ("singular" in settled) return settled;
  const { eliminated, white } = settled;
  let ln = lnAround(bench, eliminated, white.logDeterminant);
  if (layout.moving) ln += asymmetryFactors(layout, state.variance);
  return { ln, eliminated, base: bench.evaluated.base };
}

/** The same by a design worked out before: its pivots' right sides aren't those of this point. */
export function conditionalBy(
  bench: Workbench,
  design: FixedDesign,
  { outer, scenario }: { outer: Float64Array; scenario: number },
): Conditional | null {
  if (!evaluateRows(bench, outer, scenario)) return null;
  const tail = tailAt(design.eliminated, design.solve(bench.state.residual));
  const eliminated = { ...design.eliminated, tail };
  const ln = lnAround(bench, eliminated, design.logDeterminant);
  return { ln, eliminated, base: bench.evaluated.base };
}

function lnAround(
  { layout, prior }: Workbench,
  { tail, logPivots }: Eliminated,
  logDeterminant: number,
): number {
  const constants = layout.gaussian.length * LN_2PI + logDeterminant + prior.logDeterminant;
  return -(constants + tail.rss) / 2 - logPivots;
}

function asymmetryFactors({ gaussian, problem }: Layout, variance: Float64Array): number {
  const { kind, asymmetric, variance: extra } = problem.rows;
  let ln = 0;
  for (const i of gaussian) {
    if (kind[i] !== ASYMMETRIC) continue;
    ln += asymmetryFactor(variance[i]! - extra[i]!, asymmetric!.plus[i]!, asymmetric!.minus[i]!);
  }
  return ln;
}
