import { minimiseLeastSquares } from "@weighhouse/numerics/levenberg-marquardt";
import { sobolPoints } from "@weighhouse/numerics/sobol";
import { evaluateRows } from "./conditional";
import { fixedDesignOf, type FixedDesign } from "./fixed-design";
import { bestFit, settle } from "./fixed-point";
import { layoutOf } from "./layout";
import {
  EACH_FLAT,
  type BlockFit,
  type BlockOutcome,
  type BlockProblem,
  type OuterUnknown,
} from "./problem";
import { residualsAtValues, sumOfSquares } from "./residuals";
import { rowSum } from "./row-sum";
import { workbenchOf, type Workbench } from "./workbench";

/** A flat unknown's minimum within this share of its width of a bound is at the bound. */
const AT_BOUND = 1e-6;
const STARTS = 8;
/** Data that pull an unknown away from its prior may have their minimum so many times as far out. */
const STRETCH = 4;
const MOST_STARTS = 512;

/**
 * The penalised minimum of
 *
 *   sum of residual^2 + z' P z + sum of c^2 over penalised outer unknowns
 *
 * over everything unknown, flat unknowns within their bounds; the best scenario. With all Gaussian
 * it is r' (D + WW')^-1 r. Linear unknowns are eliminated at each step, the outer ones found by
 * Levenberg-Marquardt from several starts. Rows whose factor has no residual aren't looked at.
 *
 * @returns null where the likelihood is zero at every one of 512 starts
 * Accuracy: 1e-10 relative; with outer unknowns the lowest of the minima that the starts lead to.
 */
export function blockFit(problem: BlockProblem): BlockOutcome<BlockFit | null> {
  const made = workbenchOf(layoutOf(problem, "fit"));
  if (!made.ok) return made;
  const { bench } = made;
  let best: (Minimum & { scenario: number }) | null = null;
  for (let scenario = 0; scenario < problem.scenarios.length; scenario += 1) {
    let found = outerMinima(bench, scenario, nearAndFar(problem.outer, STARTS));
    // Where expressions have a value in a corner of the priors only.
    for (let more = 8 * STARTS; isNone(found) && more <= MOST_STARTS; more *= 8) {
      found = outerMinima(bench, scenario, startsFor(problem.outer, more));
    }
    if ("singular" in found)
      return { ok: false, refusal: { kind: "singular", rows: found.singular } };
    const [least] = found;
    if (least !== undefined && !(best !== null && best.chiSquare <= least.chiSquare)) {
      best = { ...least, scenario };
    }
  }
  return best === null ? null : { ok: true, ...described(bench, best) };
}

function isNone(found: readonly Minimum[] | { singular: number[] }): boolean {
  return Array.isArray(found) && found.length === 0;
}

export interface Minimum {
  /** Coordinates of the outer unknowns. */
  outer: Float64Array;
  chiSquare: number;
}

/** Coordinates to start from: the priors' medians, then points spread evenly over the priors. */
export function startsFor(outer: readonly OuterUnknown[], count: number): Float64Array[] {
  const size = outer.length;
  if (size === 0) return [new Float64Array(0)];
  // Point 0 of the sequence is the corner, point 1 the middle.
  const points = sobolPoints(size, count, 1);
  return Array.from({ length: count }, (_, n) =>
    Float64Array.from(outer, (one, j) => one.quantile(points[n * size + j]!)),
  );
}

/** Points spread over the priors, then the same further out where a prior is a normal's. */
export function nearAndFar(outer: readonly OuterUnknown[], count: number): Float64Array[] {
  const near = startsFor(outer, count);
  const reaches = outer.some(({ penalised }) => penalised);
  return reaches ? [...near, ...near.map((start) => stretched(outer, start))] : near;
}

function stretched(outer: readonly OuterUnknown[], start: Float64Array): Float64Array {
  return start.map((c, j) => {
    const { penalised, lower, upper } = outer[j]!;
    return penalised ? Math.min(Math.max(STRETCH * c, lower), upper) : c;
  });
}

/** Minima of chi-square reached from the starts, the lowest first, each once. */
export function outerMinima(
  bench: Workbench,
  scenario: number,
  starts: readonly Float64Array[],
): Minimum[] | { singular: number[] } {
  const { outer } = bench.layout.problem;
  const first = residualsAt(bench, starts[0]!, { scenario, design: null });
  if (first !== null && "singular" in first) return first;
  if (outer.length === 0) {
    return first === null ? [] : [{ outer: starts[0]!, chiSquare: sumOfSquares(first) }];
  }
  const lower = Float64Array.from(outer, (one) => one.lower);
  const upper = Float64Array.from(outer, (one) => one.upper);
  const count = countOf(bench);
  const minima: Minimum[] = [];
  const design = bench.layout.bounds.length === 0 ? fixedDesignOf(bench) : null;
  for (const start of starts) {
    const residuals = (c: Float64Array, out: Float64Array) => {
      const found = residualsAt(bench, c, { scenario, design });
      if (found === null || "singular" in found) out.fill(NaN);
      else out.set(found);
    };
    const fit = minimiseLeastSquares({ count, residuals, start, lower, upper });
    if (!(fit.chiSquare < Infinity)) continue;
    const known = minima.some(
      (one) => Math.abs(one.chiSquare - fit.chiSquare) <= 1e-6 * (1 + one.chiSquare),
    );
    if (!known) minima.push({ outer: fit.x, chiSquare: fit.chiSquare });
  }
  return minima.sort((a, b) => a.chiSquare - b.chiSquare);
}

function countOf({ layout, prior }: Workbench): number {
  return layout.gaussian.length + prior.rows.length + layout.problem.outer.length;
}

function valuesAt(outer: readonly OuterUnknown[], c: Float64Array): Float64Array {
  return Float64Array.from(outer, (one, j) => one.valueAt(c[j]!));
}

/** All residuals at the best linear unknowns there: of the rows, of their priors, of the outer's. */
function residualsAt(
  bench: Workbench,
  c: Float64Array,
  { scenario, design }: { scenario: number; design: FixedDesign | null },
): Float64Array | null | { singular: number[] } {
  const { layout, prior } = bench;
  const { outer } = layout.problem;
  const residuals = new Float64Array(countOf(bench));
  const penalties = layout.gaussian.length + prior.rows.length;
  outer.forEach(({ penalised }, j) => (residuals[penalties + j] = penalised ? c[j]! : 0));
  if (design !== null) {
    if (!evaluateRows(bench, valuesAt(outer, c), scenario)) return null;
    const { rows, priors } = design.solve(bench.state.residual);
    residuals.set(rows);
    residuals.set(priors, rows.length);
    return residuals;
  }
  const fit = linearFitAt(bench, valuesAt(outer, c), scenario);
  if (fit === null || "singular" in fit) return fit;
  residuals.set(residualsAtValues(bench, fit.white, fit.values));
  return residuals;
}

function linearFitAt(bench: Workbench, outer: Float64Array, scenario: number) {
  if (!evaluateRows(bench, outer, scenario)) return null;
  const settled = settle(bench);
  if ("singular" in settled) return settled;
  const values = settled.values ?? bestFit(bench.layout, settled.eliminated);
  return { white: settled.white, values };
}

function described(bench: Workbench, best: Minimum & { scenario: number }): Omit<BlockFit, "ok"> {
  const { layout } = bench;
  const { outer, linear } = layout.problem;
  const values = valuesAt(outer, best.outer);
  const fit = linearFitAt(bench, values, best.scenario);
  const positions = fit !== null && "values" in fit ? fit.values : new Float64Array(layout.size);
  return {
    chiSquare: best.chiSquare,
    flatInside:
      outer.filter((one, j) => !one.penalised && one.counted && isInside(one, values[j]!)).length +
      flatsInside(bench, positions) +
      eachInside(bench, positions),
    scenario: best.scenario,
    outer: values,
    linear: Float64Array.from(linear, (_, k) => positions[layout.place[k]!]!),
  };
}

function isInside(one: OuterUnknown, value: number): boolean {
  const lower = one.valueAt(one.lower);
  const upper = one.valueAt(one.upper);
  const margin = AT_BOUND * (upper - lower);
  return value - lower > margin && upper - value > margin;
}

function flatsInside({ layout }: Workbench, positions: Float64Array): number {
  if (layout.bounds.length === 0) return 0;
  const touched = new Set<number>();
  for (const i of layout.gaussian) {
    for (let e = layout.start[i]!; e < layout.start[i + 1]!; e += 1)
      touched.add(layout.position[e]!);
  }
  let inside = 0;
  layout.bounds.forEach(({ lower, upper, width }, f) => {
    const value = positions[layout.open + f]!;
    const margin = AT_BOUND * width;
    const within = value - lower > margin && upper - value > margin;
    if (within && touched.has(layout.open + f)) inside += 1;
  });
  return inside;
}

function eachInside(bench: Workbench, positions: Float64Array): number {
  const { layout, plan, evaluated, bent } = bench;
  const { rows } = layout.problem;
  if (rows.eachFlat === null) return 0;
  const own = new Set(plan.singles);
  let inside = 0;
  for (const { row } of layout.bent) {
    if (rows.kind[row] !== EACH_FLAT) continue;
    const lower = rows.eachFlat.lower[row]!;
    const upper = rows.eachFlat.upper[row]!;
    const margin = AT_BOUND * (upper - lower);
    // On a smooth process, what the last tangent was taken at: the process's value is in that.
    const mu = own.has(row)
      ? evaluated.base[row]! + rowSum(bench, row, positions)
      : bent.get(row)!.mu;
    const t = rows.observed[row]! - mu;
    if (t - lower > margin && upper - t > margin) inside += 1;
  }
  return inside;
}
