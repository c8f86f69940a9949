import { gridBelow, gridOn, gridWeights, type ChartGrid, type Integrand } from "./chart-grid";
import { squareFromPeak, type Chart } from "./cube-chart";
import type { CubeIntegral, CubeMode } from "./cube-integral";
import { peaksOf, type TopPeak } from "./cube-peaks";
import { iteratedIntegral } from "./iterated-integral";
import { partedAroundNarrow } from "./narrow-peaks";

/** Nodes an axis, step by step. */
const ORDERS = { 2: [12, 16, 20, 24, 28, 34, 40], 3: [8, 12, 16, 20, 24, 28, 34, 40] } as const;
/** Two orders may agree by chance, so that the difference before counts too, by this share. */
const FIRST_STEPS = 2;
const OF_BEFORE = 0.03;
/** Coarser agreement of two orders proves nothing, whatever is asked for. */
const COARSEST = 1e-6;
/** Where most steps are done, one that leaves more than this of the error leads nowhere. */
const CONVERGING = 0.3;
const MOST_CALLS = 2_000_000;
/** So many roundings of the log density itself are allowed for. */
const ROUNDINGS = 16;
/** Nodes of less than e^-40 of the mass are left out of the posterior's points. */
const NEGLIGIBLE = 40;

type LogDensity = (u: Float64Array) => number;

interface CubatureOptions {
  modes: readonly CubeMode[];
  breaks: readonly (readonly number[])[];
  relative: number;
  /** Asked where the work is without bound; the error then says what is left. */
  mayGoOn?: () => boolean;
}

/** A chart's share of the integral. */
interface Piece {
  integrand: Integrand;
  step: number;
  grid: ChartGrid;
  /** ln of the difference from the order before. */
  lnDifference: number;
  /** Over exp(grid.top). */
  error: number;
}

/**
 * ln of the integral of exp(f) over the unit square or cube.
 *
 * Each peak has a chart, a smooth map of the whole cube that makes it broad and upright; with
 * several, f is shared out among them by weights that add up to 1. On each chart, parted at the
 * breaks, a tensor Gauss-Legendre rule is refined until two orders agree; their difference, which
 * overstates the error of the finer one, is the error. Where a chart doesn't converge, the
 * cube is parted around its narrow peaks (narrow-peaks.ts); where that doesn't help either, the
 * integral is done axis by axis (iterated-integral.ts).
 *
 * @param f log density; -Infinity allowed
 * @param modes needed for peaks below some 1e-2 of the cube beside others; a single smooth peak of
 *   any width is found by its slopes
 * @returns with `cdf`
 * Accuracy: `relative` in ln Z, for peaks of any width and correlation; about 4e3 calls for a
 *   smooth peak on the square, 3e4 on the cube, some 1e5 and 1e6 axis by axis.
 * Source: Davis & Rabinowitz, Methods of Numerical Integration, 5.6 (product rules); sharing out
 * among peaks: Kleiss & Pittau, Comput. Phys. Commun. 83 (1994) 141.
 */
export function cubature(f: LogDensity, dimension: 2 | 3, options: CubatureOptions): CubeIntegral {
  let evaluations = 0;
  const counted = (u: Float64Array) => {
    evaluations += 1;
    return f(u);
  };
  const { breaks, relative, mayGoOn = () => evaluations < MOST_CALLS } = options;
  const peaks = peaksOf(counted, dimension, options.modes);
  const onCharts =
    integralOnCharts(counted, { peaks, breaks, relative }) ??
    integralAroundNarrow(counted, { peaks, breaks, relative });
  if (onCharts !== null) return { ...onCharts, evaluations };
  const square = (g: LogDensity, inner: CubatureOptions) => cubature(g, 2, inner);
  const byAxes = { peaks, breaks, relative, mayGoOn, square };
  return { ...iteratedIntegral(counted, dimension, byAxes), evaluations };
}

interface OnCharts extends Pick<CubatureOptions, "breaks" | "relative"> {
  peaks: readonly TopPeak[];
}

type Found = Omit<CubeIntegral, "evaluations">;

function integralOnCharts(
  density: LogDensity,
  { peaks, breaks, relative }: OnCharts,
): Found | null {
  const boxes = boxesBetween(breaks, peaks[0]!.centre.length);
  const starts = peaks.flatMap((peak, k) => {
    const share = peaks.length > 1 ? shareOf(peaks, k) : () => 0;
    return boxes.map((box) => ({ integrand: { density, share }, chart: { peak, ...box } }));
  });
  return converged(starts, relative);
}

function integralAroundNarrow(
  density: LogDensity,
  { peaks, breaks, relative }: OnCharts,
): Found | null {
  const parting = partedAroundNarrow(peaks, breaks);
  if (parting === null) return null;
  const starts = boxesBetween(parting.breaks, peaks[0]!.centre.length).flatMap((box) => {
    const here = parting.peaksIn(box);
    return here.map((peak, k) => {
      const share = here.length > 1 ? shareOf(here, k) : () => 0;
      return { integrand: { density, share }, chart: { peak, ...box } };
    });
  });
  return converged(starts, relative);
}

/** null where the rule doesn't converge on one of the charts. */
function converged(
  starts: readonly { integrand: Integrand; chart: Chart }[],
  relative: number,
): Found | null {
  const orders = starts[0]!.chart.lower.length === 2 ? ORDERS[2] : ORDERS[3];
  const pieces = starts.map(({ integrand, chart }) => firstPiece(integrand, chart, orders));
  for (;;) {
    const { top, value, error, worst } = totalOf(pieces);
    if (value === 0) return nothing();
    // A log density of many digits before its point has few after it: no order gets below that.
    const noise = ROUNDINGS * Number.EPSILON * Math.abs(top);
    if (error <= Math.max(Math.min(relative, COARSEST), noise) * value) {
      const ln = top + Math.log(value);
      return {
        ...posterior(pieces, ln),
        ln,
        error: Math.max(error / value, noise > relative ? noise : 0),
      };
    }
    if (!improve(pieces[worst]!, orders)) return null;
  }
}

function boxesBetween(breaks: CubatureOptions["breaks"], dimension: number) {
  let boxes = [{ lower: new Float64Array(dimension), upper: new Float64Array(dimension).fill(1) }];
  for (let axis = 0; axis < dimension; axis += 1) {
    const inside = (breaks[axis] ?? []).filter((x) => x > 0 && x < 1).sort((a, b) => a - b);
    const cuts = [0, ...new Set(inside), 1];
    boxes = boxes.flatMap((box) =>
      cuts.slice(1).map((cut, i) => {
        const [lower, upper] = [box.lower.slice(), box.upper.slice()];
        [lower[axis], upper[axis]] = [cuts[i]!, cut];
        return { lower, upper };
      }),
    );
  }
  return boxes;
}

/**
 * The share of peak k, q_k / sum of q_j, q_j the peak's height times (1 + d^2 / 24)^-12, d the distance from it
 * in its own metric: nearly a normal, so that of a sum of normals each chart has its own one left;
 * with tails that change slowly in between.
 */
function shareOf(peaks: readonly TopPeak[], k: number): LogDensity {
  const z = new Float64Array(peaks[k]!.centre.length);
  const logs = new Float64Array(peaks.length);
  return (u) => {
    let top = -Infinity;
    for (let j = 0; j < peaks.length; j += 1) {
      logs[j] = peaks[j]!.height - 12 * Math.log1p(squareFromPeak(peaks[j]!, u, z) / 24);
      if (logs[j]! > top) top = logs[j]!;
    }
    let sum = 0;
    for (let j = 0; j < peaks.length; j += 1) sum += Math.exp(logs[j]! - top);
    return logs[k]! - top - Math.log(sum);
  };
}

function firstPiece(integrand: Integrand, chart: Chart, orders: readonly number[]): Piece {
  const grid = gridOn(integrand, chart, orders[0]!);
  const piece = { integrand, step: 0, grid, lnDifference: Infinity, error: grid.value };
  while (piece.step < FIRST_STEPS) raise(piece, orders);
  return piece;
}

function raise(piece: Piece, orders: readonly number[]): void {
  const { integrand, grid } = piece;
  const next = gridOn(integrand, grid.chart, orders[piece.step + 1]!);
  const last = grid.top === -Infinity ? 0 : grid.value * Math.exp(grid.top - next.top);
  const difference = Math.abs(next.value - last);
  const before = piece.step === 0 ? 0 : OF_BEFORE * Math.exp(piece.lnDifference - next.top);
  piece.error = next.top === -Infinity ? 0 : Math.max(difference, before);
  piece.lnDifference = next.top + Math.log(difference);
  piece.grid = next;
  piece.step += 1;
}

/** Goes on to the next order; false where that leads nowhere. */
function improve(piece: Piece, orders: readonly number[]): boolean {
  if (piece.step + 1 >= orders.length) return false;
  const before = piece.grid.top + Math.log(piece.error);
  raise(piece, orders);
  const after = piece.grid.top + Math.log(piece.error);
  return piece.step <= FIRST_STEPS + 3 || after < before + Math.log(CONVERGING);
}

function totalOf(pieces: readonly Piece[]) {
  let top = -Infinity;
  for (const { grid } of pieces) top = Math.max(top, grid.top);
  let value = 0;
  let error = 0;
  let worst = 0;
  let largest = -1;
  pieces.forEach((piece, i) => {
    if (piece.grid.top === -Infinity) return;
    const scale = Math.exp(piece.grid.top - top);
    value += piece.grid.value * scale;
    error += piece.error * scale;
    if (piece.error * scale > largest) [largest, worst] = [piece.error * scale, i];
  });
  return { top, value, error, worst };
}

function nothing(): Found {
  const nodes = { points: new Float64Array(0), lnWeights: new Float64Array(0) };
  return { ln: -Infinity, error: 0, information: 0, nodes };
}

function posterior(
  pieces: readonly Piece[],
  ln: number,
): Pick<CubeIntegral, "nodes" | "information" | "cdf"> {
  const points: number[] = [];
  const lnWeights: number[] = [];
  let sum = 0;
  let information = 0;
  for (const { grid } of pieces) {
    const dimension = grid.chart.lower.length;
    const weights = gridWeights(grid);
    for (let k = 0; k < weights.length; k += 1) {
      const lnWeight = grid.logs[k]! + Math.log(weights[k]!) - ln;
      if (!(lnWeight > -NEGLIGIBLE)) continue;
      for (let i = 0; i < dimension; i += 1) points.push(grid.points[k * dimension + i]!);
      lnWeights.push(lnWeight);
      sum += Math.exp(lnWeight);
      information += Math.exp(lnWeight) * (grid.densities[k]! - ln);
    }
  }
  const nodes = {
    points: Float64Array.from(points),
    lnWeights: Float64Array.from(lnWeights, (lnWeight) => lnWeight - Math.log(sum)),
  };
  return { nodes, information: Math.max(0, information / sum), cdf: cdfOf(pieces, ln) };
}

function cdfOf(pieces: readonly Piece[], ln: number): (axis: number, x: number) => number {
  const prepared = new Map<number, ((x: number) => number)[]>();
  const partsOf = (axis: number) =>
    pieces
      .filter(({ grid }) => grid.top > -Infinity)
      .map(({ grid }) => {
        const below = gridBelow(grid, axis);
        const scale = Math.exp(grid.top - ln);
        return (x: number) => below(x) * scale;
      });
  return (axis, x) => {
    if (x <= 0) return 0;
    if (x >= 1) return 1;
    const parts = prepared.get(axis) ?? partsOf(axis);
    prepared.set(axis, parts);
    let sum = 0;
    for (const part of parts) sum += part(x);
    return Math.min(Math.max(sum, 0), 1);
  };
}
