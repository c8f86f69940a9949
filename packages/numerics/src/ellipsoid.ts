import type { RandomSource } from "./random-source";

/** {u : |A^-1 (u - mean)|^2 <= radius^2}, A the Cholesky factor of a covariance. */
export interface Ellipsoid {
  mean: Float64Array;
  /** Lower triangular, d x d, row by row. */
  factor: Float64Array;
  radius: number;
  /** ln of its volume. */
  lnVolume: number;
}

/**
 * The ellipsoid with the covariance of some points, just large enough to hold them all.
 *
 * @param points n x d
 * @param members rows of `points`, with repetitions if one likes; at least two different ones
 */
export function ellipsoidAround(
  points: Float64Array,
  dimension: number,
  members: ArrayLike<number>,
): Ellipsoid {
  const mean = new Float64Array(dimension);
  const count = members.length;
  for (let m = 0; m < count; m += 1) {
    const at = members[m]! * dimension;
    for (let i = 0; i < dimension; i += 1) mean[i]! += points[at + i]! / count;
  }
  const covariance = new Float64Array(dimension * dimension);
  for (let m = 0; m < count; m += 1) {
    const at = members[m]! * dimension;
    for (let i = 0; i < dimension; i += 1) {
      const off = (points[at + i]! - mean[i]!) / count;
      for (let j = 0; j <= i; j += 1) {
        covariance[i * dimension + j]! += off * (points[at + j]! - mean[j]!);
      }
    }
  }
  const one = { mean, factor: factorOf(covariance, dimension), radius: 1, lnVolume: 0 };
  let radius = 0;
  for (let m = 0; m < count; m += 1) {
    radius = Math.max(radius, distanceIn(one, points, members[m]! * dimension));
  }
  return withRadius(one, radius * (1 + 1e-9));
}

export function withRadius(ellipsoid: Ellipsoid, radius: number): Ellipsoid {
  const dimension = ellipsoid.mean.length;
  let lnVolume = lnUnitBall(dimension) + dimension * Math.log(radius);
  for (let i = 0; i < dimension; i += 1) {
    lnVolume += Math.log(ellipsoid.factor[i * dimension + i]!);
  }
  return { ...ellipsoid, radius, lnVolume };
}

/** |A^-1 (u - mean)| for the d numbers of `points` from `at` on. */
export function distanceIn(ellipsoid: Ellipsoid, points: Float64Array, at: number): number {
  const dimension = ellipsoid.mean.length;
  const z = scratchOf(dimension);
  whiten(ellipsoid, at === 0 ? points : points.subarray(at), z);
  let square = 0;
  for (let i = 0; i < dimension; i += 1) square += z[i]! * z[i]!;
  return Math.sqrt(square);
}

/** A^-1 (u - mean), of the first d numbers of u into those of z. */
export function whiten({ mean, factor }: Ellipsoid, u: Float64Array, z: Float64Array): void {
  const dimension = mean.length;
  for (let i = 0; i < dimension; i += 1) {
    const row = i * dimension;
    let rest = u[i]! - mean[i]!;
    for (let j = 0; j < i; j += 1) rest -= factor[row + j]! * z[j]!;
    z[i] = rest / factor[row + i]!;
  }
}

/** A point drawn uniformly from the ellipsoid into `u`. */
export function drawInside(ellipsoid: Ellipsoid, random: RandomSource, u: Float64Array): void {
  const dimension = u.length;
  const z = scratchOf(dimension);
  directionIn(random, z);
  const length = ellipsoid.radius * random.uniform() ** (1 / dimension);
  for (let i = dimension - 1; i >= 0; i -= 1) {
    let sum = 0;
    for (let j = 0; j <= i; j += 1) sum += ellipsoid.factor[i * dimension + j]! * z[j]!;
    u[i] = ellipsoid.mean[i]! + length * sum;
  }
}

/** A direction whose image on the unit sphere of the ellipsoid is uniform, as long as its radius. */
export function drawDirection(ellipsoid: Ellipsoid, random: RandomSource, u: Float64Array): void {
  const dimension = u.length;
  const z = scratchOf(dimension);
  directionIn(random, z);
  for (let i = 0; i < dimension; i += 1) {
    let sum = 0;
    for (let j = 0; j <= i; j += 1) sum += ellipsoid.factor[i * dimension + j]! * z[j]!;
    u[i] = ellipsoid.radius * sum;
  }
}

function directionIn(random: RandomSource, z: Float64Array): void {
  let square = 0;
  for (let i = 0; i < z.length; i += 1) {
    z[i] = random.normal();
    square += z[i]! * z[i]!;
  }
  const length = Math.sqrt(square);
  for (let i = 0; i < z.length; i += 1) z[i]! /= length;
}

/** Cholesky; a direction in which the points don't spread is given 1e-10 of the widest axis. */
function factorOf(covariance: Float64Array, dimension: number): Float64Array {
  const factor = new Float64Array(dimension * dimension);
  let widest = Number.MIN_VALUE;
  for (let i = 0; i < dimension; i += 1) {
    widest = Math.max(widest, covariance[i * dimension + i]!);
  }
  for (let i = 0; i < dimension; i += 1) {
    for (let j = 0; j <= i; j += 1) {
      let rest = covariance[i * dimension + j]!;
      for (let k = 0; k < j; k += 1) {
        rest -= factor[i * dimension + k]! * factor[j * dimension + k]!;
      }
      const own = Math.max(covariance[i * dimension + i]! * 1e-14, widest * 1e-24, 1e-290);
      factor[i * dimension + j] =
        i === j ? Math.sqrt(Math.max(rest, own)) : rest / factor[j * dimension + j]!;
    }
  }
  return factor;
}

const scratch: Float64Array[] = [];

function scratchOf(dimension: number): Float64Array {
  return (scratch[dimension] ??= new Float64Array(dimension));
}

/** V_d = V_(d-2) 2 pi / d, from V_0 = 1 and V_1 = 2. */
function lnUnitBall(dimension: number): number {
  let ln = dimension % 2 === 0 ? 0 : Math.LN2;
  for (let d = dimension; d > 1; d -= 2) ln += Math.log((2 * Math.PI) / d);
  return ln;
}
