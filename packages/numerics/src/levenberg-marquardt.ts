import { differenceJacobian } from "./difference-jacobian";
import { columnSystem, scaledRank, triangularFactor } from "./jacobian-factors";
import { norm } from "./pivoted-qr";
import type { TriangularSystem } from "./triangular-system";
import { trustRegionStep } from "./trust-region-step";

const EPSILON = 2 ** -52;

export interface LeastSquaresProblem {
  /** How many residuals. */
  count: number;
  /** Writes the residuals at x; ones that aren't finite make x inadmissible. */
  residuals(x: Float64Array, out: Float64Array): void;
  /**
   * Writes d residual_i / d x_j to out[i * size + j], size = start.length. Without it, or where it
   * isn't finite, differences are taken.
   */
  jacobian?(x: Float64Array, out: Float64Array): void;
  start: ArrayLike<number>;
  /** Bounds, infinities allowed; the start is moved inside. */
  lower?: ArrayLike<number>;
  upper?: ArrayLike<number>;
  /** Of the Jacobian's evaluations; 1000 unless given. */
  maxIterations?: number;
}

export interface LeastSquaresFit {
  x: Float64Array;
  /** Sum of squared residuals at x; Infinity where the start itself is inadmissible. */
  chiSquare: number;
  iterations: number;
  /** Whether no admissible step is expected to lower chiSquare by more than rounding. */
  converged: boolean;
  /** Of the Jacobian at x with its columns scaled to one length: below x's size, x isn't unique. */
  jacobianRank: number;
  /** Upper triangular R, row by row, with R'R = J'J at x, all of x's components in order. */
  factor: Float64Array;
}

/**
 * A local minimum of a sum of squares, by the Levenberg-Marquardt method in More's form: a trust
 * region scaled by the largest column norms of the Jacobian seen so far, each step by QR.
 *
 * Bounds: components at a bound that the gradient pushes against are left out of a step, and a step
 * is cut at the bounds.
 *
 * @returns a fit; whether it is the lowest minimum only other starts can tell. chiSquare is right to
 *   1e-10 relative where the residuals themselves are, x to 1e-7 of its standard uncertainties
 * Source: J. J. More, Lecture Notes in Mathematics 630 (1978) 105; MINPACK lmder; for bounds
 * Kanzow, Yamashita & Fukushima, J. Comput. Appl. Math. 172 (2004) 375 (projection). Reference
 * values: test/reference/data/nist, NIST's certified non-linear regressions.
 */
export function minimiseLeastSquares(problem: LeastSquaresProblem): LeastSquaresFit {
  const state = startingState(problem);
  const { size } = state;
  let converged = false;
  let iterations = 0;
  const limit = problem.maxIterations ?? 1000;
  while (Number.isFinite(state.length) && !converged && iterations < limit) {
    iterations += 1;
    if (!updateJacobian(problem, state)) break;
    if (state.length === 0 || stationary(state)) {
      converged = true;
      break;
    }
    updateScale(state, iterations === 1);
    converged = improve(problem, state);
  }
  const known = Number.isFinite(state.length) && updateJacobian(problem, state);
  return {
    x: state.x,
    chiSquare: known || Number.isFinite(state.length) ? sumOfSquares(state.residuals) : Infinity,
    iterations,
    converged,
    jacobianRank: known ? scaledRank(state) : 0,
    factor: known ? triangularFactor(state) : new Float64Array(size * size),
  };
}

interface State {
  size: number;
  count: number;
  x: Float64Array;
  lower: Float64Array;
  upper: Float64Array;
  largest: Float64Array;
  residuals: Float64Array;
  /** |residuals|. */
  length: number;
  /** Row by row. */
  jacobian: Float64Array;
  gradient: Float64Array;
  columnNorms: Float64Array;
  scale: Float64Array;
  radius: number;
  parameter: number;
}

function startingState(problem: LeastSquaresProblem): State {
  const size = problem.start.length;
  const lower = Float64Array.from({ length: size }, (_, j) => problem.lower?.[j] ?? -Infinity);
  const upper = Float64Array.from({ length: size }, (_, j) => problem.upper?.[j] ?? Infinity);
  const x = Float64Array.from({ length: size }, (_, j) =>
    Math.min(Math.max(problem.start[j]!, lower[j]!), upper[j]!),
  );
  const residuals = new Float64Array(problem.count);
  problem.residuals(x, residuals);
  return {
    size,
    count: problem.count,
    x,
    lower,
    upper,
    largest: x.map(Math.abs),
    residuals,
    length: lengthOf(residuals),
    jacobian: new Float64Array(problem.count * size),
    gradient: new Float64Array(size),
    columnNorms: new Float64Array(size),
    scale: new Float64Array(size).fill(1),
    radius: 0,
    parameter: 0,
  };
}

/** The norm, NaN unless every entry is finite. */
function lengthOf(residuals: Float64Array): number {
  return residuals.every(Number.isFinite) ? norm(residuals) : NaN;
}

function sumOfSquares(residuals: Float64Array): number {
  let sum = 0;
  for (const r of residuals) sum += r * r;
  return sum;
}

function updateJacobian(problem: LeastSquaresProblem, state: State): boolean {
  const { size, count, jacobian, residuals, gradient, columnNorms, largest, x } = state;
  for (let j = 0; j < size; j += 1) largest[j] = Math.max(largest[j]!, Math.abs(x[j]!));
  problem.jacobian?.(state.x, jacobian);
  if (problem.jacobian === undefined || !jacobian.every(Number.isFinite)) {
    differenceJacobian(problem, state);
    if (!jacobian.every(Number.isFinite)) return false;
  }
  const column = new Float64Array(count);
  for (let j = 0; j < size; j += 1) {
    let sum = 0;
    for (let i = 0; i < count; i += 1) {
      column[i] = jacobian[i * size + j]!;
      sum += column[i]! * residuals[i]!;
    }
    gradient[j] = sum;
    columnNorms[j] = norm(column);
  }
  return true;
}

/** Components that a step may move: not those that the gradient pushes against their bound. */
function freeComponents({ size, x, lower, upper, gradient }: State): number[] {
  const free: number[] = [];
  for (let j = 0; j < size; j += 1) {
    const held =
      (x[j]! <= lower[j]! && gradient[j]! >= 0) || (x[j]! >= upper[j]! && gradient[j]! <= 0);
    if (!held) free.push(j);
  }
  return free;
}

/** Residuals at right angles, to rounding, to every column that may move. */
function stationary(state: State): boolean {
  return freeComponents(state).every(
    (j) => Math.abs(state.gradient[j]!) <= EPSILON * state.length * state.columnNorms[j]!,
  );
}

function updateScale(state: State, first: boolean): void {
  const { size, scale, columnNorms, x } = state;
  for (let j = 0; j < size; j += 1) {
    if (first) scale[j] = columnNorms[j]! || 1;
    else scale[j] = Math.max(scale[j]!, columnNorms[j]!);
  }
  if (first) {
    // No further than x itself: exponentials overshoot into regions where they are flat.
    const length = norm(x.map((value, j) => value * scale[j]!));
    state.radius = length || state.length;
  }
}

/** Shortens the step until one lowers the sum of squares; true where none can any more. */
function improve(problem: LeastSquaresProblem, state: State): boolean {
  const free = freeComponents(state);
  const { system, order } = columnSystem(state, free, state.residuals);
  const scale = Float64Array.from(order, (j) => state.scale[j]!);
  const trial = { x: state.x.slice(), residuals: new Float64Array(state.count) };
  for (;;) {
    const { step, parameter } = trustRegionStep(system, scale, state.radius, state.parameter);
    state.parameter = Number.isFinite(parameter) ? parameter : 0;
    const plan = planStep(state, { system, order, scale, step, parameter }, trial.x);
    problem.residuals(trial.x, trial.residuals);
    const length = lengthOf(trial.residuals);
    const actual = 0.1 * length < state.length ? 1 - (length / state.length) ** 2 : -1;
    const ratio = plan.predicted > 0 ? actual / plan.predicted : 0;
    updateRadius(state, plan, { length, actual, ratio });
    const accepted = ratio >= 1e-4;
    if (accepted) {
      state.x.set(trial.x);
      state.residuals.set(trial.residuals);
      state.length = length;
    }
    const size = norm(state.x.map((value, j) => value * state.scale[j]!));
    const spent = Math.abs(actual) <= EPSILON && plan.predicted <= EPSILON && ratio <= 2;
    if (spent || !(state.radius > EPSILON * size) || state.radius < 1e-300) return true;
    if (accepted) return false;
  }
}

interface Plan {
  /** The share of the sum of squares that the linear model takes away. */
  predicted: number;
  /** Half of the derivative along the step, over the sum of squares; < 0. */
  slope: number;
  /** |D p| of the step before it was cut. */
  reach: number;
}

interface PlannedStep {
  system: TriangularSystem;
  order: number[];
  scale: Float64Array;
  step: Float64Array;
  parameter: number;
}

/** Writes the trial point, cut at the bounds, and what the linear model expects of it. */
function planStep(state: State, planned: PlannedStep, x: Float64Array): Plan {
  const { system, order, scale, step, parameter } = planned;
  const reach = norm(step.map((value, k) => value * scale[k]!));
  let cut = false;
  x.set(state.x);
  order.forEach((j, k) => {
    const wanted = state.x[j]! + step[k]!;
    const taken = Math.min(Math.max(wanted, state.lower[j]!), state.upper[j]!);
    if (taken !== wanted) {
      cut = true;
      step[k] = taken - state.x[j]!;
    }
    x[j] = taken;
  });
  const moved = norm(multiply(system, step)) / state.length;
  if (!cut) {
    const damping = (Math.sqrt(parameter) * reach) / state.length;
    const slope = -(moved * moved + damping * damping);
    return { predicted: moved * moved + 2 * damping * damping, slope, reach };
  }
  let slope = 0;
  order.forEach((j, k) => (slope += (state.gradient[j]! / state.length) * step[k]!));
  slope /= state.length;
  return { predicted: -(2 * slope + moved * moved), slope, reach };
}

function multiply({ size, data }: TriangularSystem, step: Float64Array): Float64Array {
  const product = new Float64Array(size);
  for (let i = 0; i < size; i += 1) {
    for (let k = i; k < size; k += 1) product[i]! += data[i * (size + 1) + k]! * step[k]!;
  }
  return product;
}

interface Outcome {
  length: number;
  actual: number;
  ratio: number;
}

function updateRadius(state: State, plan: Plan, { length, actual, ratio }: Outcome): void {
  if (ratio <= 0.25) {
    let shrink = 0.5;
    if (actual < 0) shrink = Math.min((0.5 * plan.slope) / (plan.slope + 0.5 * actual), 0.5);
    if (!(0.1 * length < state.length) || !(shrink >= 0.1)) shrink = 0.1;
    const reach = Number.isFinite(plan.reach) ? plan.reach : state.radius;
    state.radius = shrink * Math.min(state.radius, reach / 0.1);
    state.parameter /= shrink;
  } else if (state.parameter === 0 || ratio >= 0.75) {
    state.radius = plan.reach / 0.5;
    state.parameter *= 0.5;
  }
}
