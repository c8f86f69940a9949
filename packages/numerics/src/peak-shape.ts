import type { Peak } from "./cube-chart";

type LogDensity = (u: Float64Array) => number;

/** Peaks found by steps of finite differences are refined at most so often. */
const ROUNDS = 8;

/**
 * Climbs to the top near `start` and measures the peak's shape there.
 *
 * @param f log density on the cube, finite at `start`
 * @param step first size of the simplex
 */
export function climb(f: LogDensity, start: Float64Array, step: number): Peak & { height: number } {
  const { x, height } = simplexAscent(f, start, step);
  const dimension = start.length;
  const factor = new Float64Array(dimension * dimension);
  for (let i = 0; i < dimension; i += 1) {
    factor[i * (dimension + 1)] = axisWidth(f, { x, height, i, step });
  }
  return refineShape(f, { centre: x, factor });
}

/**
 * Newton steps with differences taken one standard deviation apart in the peak's own axes, until
 * these are upright: also for correlations near 1. What isn't concave there, or is cut off by the
 * cube's faces, keeps the shape that it came with.
 */
export function refineShape(f: LogDensity, peak: Peak): Peak & { height: number } {
  let { centre, factor } = peak;
  const dimension = centre.length;
  centre = centre.map((x) => Math.min(Math.max(x, 0), 1));
  let height = f(centre);
  for (let round = 0; round < ROUNDS && height > -Infinity; round += 1) {
    const at = (z: number[]) => {
      const u = moved({ centre, factor }, z);
      return u.every((x) => x >= 0 && x <= 1) ? f(u) : Number.NaN;
    };
    const { gradient, curvature } = differences(at, height, dimension);
    const root = choleskyOf(curvature, dimension);
    if (root === null) break;
    const step = solveTwice(root, gradient, dimension);
    const length = Math.hypot(...step);
    const limited = step.map((s) => s / Math.max(1, length / 3));
    const next = moved({ centre, factor }, limited).map((x) => Math.min(Math.max(x, 0), 1));
    factor = rescaled(factor, root, dimension);
    const there = f(next);
    if (there >= height) [centre, height] = [next, there];
    const settled = curvature.every(
      (c, k) => Math.abs(c - (k % (dimension + 1) === 0 ? 1 : 0)) < 0.1,
    );
    if (settled && length < 0.1) break;
  }
  return { centre, factor, height };
}

/** Nelder and Mead's simplex (Computer Journal 7, 1965, 308), until it is flat to 0.05 nats. */
function simplexAscent(
  f: LogDensity,
  start: Float64Array,
  step: number,
): { x: Float64Array; height: number } {
  const dimension = start.length;
  const corners = [{ x: start, height: f(start) }];
  for (let i = 0; i < dimension; i += 1) {
    const x = start.slice();
    x[i]! += x[i]! + step < 1 ? step : -step;
    corners.push({ x, height: f(x) });
  }
  for (let tries = 0; tries < 100 * dimension; tries += 1) {
    corners.sort((a, b) => b.height - a.height);
    const best = corners[0]!;
    const worst = corners.at(-1)!;
    if (best.height - worst.height < 0.05) break;
    const middle = start.map((_, i) => {
      let sum = 0;
      for (let k = 0; k < dimension; k += 1) sum += corners[k]!.x[i]!;
      return sum / dimension;
    });
    const towards = (by: number) => {
      const x = middle.map((m, i) => m + by * (worst.x[i]! - m));
      return { x, height: f(x) };
    };
    const mirrored = towards(-1);
    let better = mirrored;
    if (mirrored.height > best.height) {
      const further = towards(-2);
      if (further.height > mirrored.height) better = further;
    } else if (!(mirrored.height > corners[dimension - 1]!.height)) {
      better = towards(mirrored.height > worst.height ? -0.5 : 0.5);
    }
    if (better.height > worst.height) corners[dimension] = better;
    else {
      for (let k = 1; k <= dimension; k += 1) {
        const x = corners[k]!.x.map((value, i) => (value + best.x[i]!) / 2);
        corners[k] = { x, height: f(x) };
      }
    }
  }
  corners.sort((a, b) => b.height - a.height);
  return corners[0]!;
}

/** How far along axis i the log density falls by about half a nat, to the nearer side; at most 1. */
function axisWidth(
  f: LogDensity,
  { x, height, i, step }: { x: Float64Array; height: number; i: number; step: number },
): number {
  const drop = (by: number) => {
    const sides = [-by, by].map((move) => {
      const u = x.slice();
      u[i]! += move;
      return u[i]! < 0 || u[i]! > 1 ? -Infinity : height - f(u);
    });
    return Math.max(...sides);
  };
  let width = step / 2;
  for (let tries = 0; tries < 60; tries += 1) {
    const fall = drop(width);
    if (fall > 2) width /= fall > 1000 ? 16 : 2;
    else if (fall < 0.25 && width < 0.5) width *= 2;
    else {
      // A straight fall, as at a face of the cube, reaches further than a normal's.
      const straight = drop(2 * width) < 3 * fall;
      return straight ? (2 * width) / Math.max(fall, 0.5) : width * Math.sqrt(0.5 / fall);
    }
  }
  return width;
}

function moved({ centre, factor }: Peak, z: ArrayLike<number>): Float64Array {
  const dimension = centre.length;
  return centre.map((x, i) => {
    let sum = x;
    for (let j = 0; j <= i; j += 1) sum += factor[i * dimension + j]! * z[j]!;
    return sum;
  });
}

/** Gradient, and minus the second derivatives, by central differences of step 1. */
function differences(at: (z: number[]) => number, height: number, dimension: number) {
  const unit = (i: number, by: number) =>
    Array.from({ length: dimension }, (_, k) => (k === i ? by : 0));
  const gradient: number[] = [];
  const curvature = new Float64Array(dimension * dimension);
  for (let i = 0; i < dimension; i += 1) {
    const up = at(unit(i, 1));
    const down = at(unit(i, -1));
    gradient.push((up - down) / 2);
    curvature[i * (dimension + 1)] = 2 * height - up - down;
  }
  for (let i = 0; i < dimension; i += 1) {
    for (let j = 0; j < i; j += 1) {
      const corner = (a: number, b: number) => at(unit(i, a).map((x, k) => (k === j ? b : x)));
      const mixed = corner(1, 1) - corner(1, -1) - corner(-1, 1) + corner(-1, -1);
      curvature[i * dimension + j] = curvature[j * dimension + i] = -mixed / 4;
    }
  }
  return { gradient, curvature };
}

/** null unless the matrix is finite and positive definite. */
function choleskyOf(matrix: Float64Array, dimension: number): Float64Array | null {
  const root = new Float64Array(matrix.length);
  for (let i = 0; i < dimension; i += 1) {
    for (let j = 0; j <= i; j += 1) {
      let rest = matrix[i * dimension + j]!;
      for (let k = 0; k < j; k += 1) rest -= root[i * dimension + k]! * root[j * dimension + k]!;
      if (i === j && !(rest > 1e-6 && rest < 1e12)) return null;
      root[i * dimension + j] = i === j ? Math.sqrt(rest) : rest / root[j * dimension + j]!;
    }
  }
  return root;
}

function solveTwice(root: Float64Array, right: number[], dimension: number): number[] {
  const y = [...right];
  for (let i = 0; i < dimension; i += 1) {
    for (let k = 0; k < i; k += 1) y[i]! -= root[i * dimension + k]! * y[k]!;
    y[i]! /= root[i * (dimension + 1)]!;
  }
  return backSolve(root, y, dimension);
}

/** x of L' x = y. */
function backSolve(root: Float64Array, y: number[], dimension: number): number[] {
  const x = [...y];
  for (let i = dimension - 1; i >= 0; i -= 1) {
    for (let k = i + 1; k < dimension; k += 1) x[i]! -= root[k * dimension + i]! * x[k]!;
    x[i]! /= root[i * (dimension + 1)]!;
  }
  return x;
}

/** The lower-triangular factor of A H^-1 A', H = L L'. */
function rescaled(factor: Float64Array, root: Float64Array, dimension: number): Float64Array {
  // Columns of A L'^-1, then their product with itself, factored anew.
  const columns = new Float64Array(dimension * dimension);
  for (let c = 0; c < dimension; c += 1) {
    const unit = Array.from({ length: dimension }, (_, k) => (k === c ? 1 : 0));
    const x = backSolve(root, unit, dimension);
    for (let i = 0; i < dimension; i += 1) {
      for (let j = 0; j <= i; j += 1)
        columns[i * dimension + c]! += factor[i * dimension + j]! * x[j]!;
    }
  }
  const sizes = Array.from({ length: dimension }, (_, i) =>
    Math.hypot(...columns.subarray(i * dimension, (i + 1) * dimension)),
  );
  const correlation = new Float64Array(dimension * dimension);
  for (let i = 0; i < dimension; i += 1) {
    for (let j = 0; j < dimension; j += 1) {
      let sum = 0;
      for (let c = 0; c < dimension; c += 1) {
        sum += columns[i * dimension + c]! * columns[j * dimension + c]!;
      }
      correlation[i * dimension + j] = sum / (sizes[i]! * sizes[j]!);
    }
  }
  const upright = choleskyOf(correlation, dimension);
  if (upright === null) return factor;
  return upright.map((value, k) => value * sizes[Math.floor(k / dimension)]!);
}
