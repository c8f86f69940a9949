import { LN_SQRT_2PI, normalQuantile } from "@weighhouse/numerics/normal";
import { sobolPoints } from "@weighhouse/numerics/sobol";
import {
  choleskyFactor,
  logDeterminant,
  whiten,
  type CholeskyFactor,
} from "@weighhouse/numerics/symmetric-cholesky";

/** A hypothesis's joint distribution of several readings: normal values, independent outcomes. */
export interface Joint {
  posterior: number;
  mean: readonly number[];
  covariance: readonly (readonly number[])[];
  outcomes: readonly (readonly number[])[];
}

const POINTS = 2 ** 12;

/**
 * Mutual information in bits between "which hypothesis" and several readings,
 *
 *   I = sum_k P_k E_k[ log2(p_k(y) / sum_j P_j p_j(y)) ]
 *
 * the expectations over 4,096 Sobol points.
 *
 * Accuracy: 1e-3 bits.
 */
export function jointGain(joints: readonly Joint[]): number {
  if (joints.length < 2) return 0;
  const solved = joints.map(solve);
  const values = joints[0]!.mean.length;
  const dimension = values + joints[0]!.outcomes.length;
  // In the middles of their cells: the points themselves lie at the cells' lower corners.
  const points = sobolPoints(dimension, POINTS).map((u) => u + 0.5 / POINTS);
  let bits = 0;
  for (const own of solved) {
    let sum = 0;
    for (let i = 0; i < POINTS; i += 1) {
      const point = points.slice(i * dimension, (i + 1) * dimension);
      sum += pointGain(solved, own, drawn(own, point, values));
    }
    bits += (own.posterior * sum) / POINTS;
  }
  return Math.max(bits / Math.LN2, 0);
}

/** ln(p_k(y) / sum_j P_j p_j(y)). */
function pointGain(solved: readonly Solved[], own: Solved, draw: Draw): number {
  const logs = solved.map((other) => logDensityOf(other, draw));
  const most = Math.max(...logs);
  let mean = 0;
  solved.forEach(({ posterior }, j) => (mean += posterior * Math.exp(logs[j]! - most)));
  return logs[solved.indexOf(own)]! - most - Math.log(mean);
}

interface Solved extends Joint {
  factor: CholeskyFactor;
  logNorm: number;
}

interface Draw {
  y: Float64Array;
  /** Which outcome each of the others has. */
  outcomes: number[];
}

function solve(joint: Joint): Solved {
  const size = joint.mean.length;
  // Correlations are read off pair by pair; of predictives that aren't normal they need not fit
  // together, and are then shrunk until they do.
  for (let shrink = 1; ; shrink *= 0.9) {
    const matrix = joint.covariance.flatMap((row, i) =>
      row.map((entry, j) => (i === j ? entry : entry * shrink)),
    );
    const found = choleskyFactor(matrix, size);
    if (!found.ok) continue;
    const { factor } = found;
    return { ...joint, factor, logNorm: -size * LN_SQRT_2PI - logDeterminant(factor) / 2 };
  }
}

function drawn({ mean, factor, outcomes }: Solved, point: Float64Array, values: number): Draw {
  const normals = Array.from(point.subarray(0, values), normalQuantile);
  const y = Float64Array.from(mean, (middle, i) => {
    let sum = middle;
    for (let k = 0; k <= i; k += 1) sum += factor.lower[i * factor.size + k]! * normals[k]!;
    return sum;
  });
  return { y, outcomes: outcomes.map((chances, i) => outcomeAt(chances, point[values + i]!)) };
}

function outcomeAt(chances: readonly number[], u: number): number {
  let sum = 0;
  for (let o = 0; o < chances.length; o += 1) {
    sum += chances[o]!;
    if (u < sum) return o;
  }
  return chances.length - 1;
}

function logDensityOf({ mean, factor, logNorm, outcomes }: Solved, draw: Draw): number {
  const residual = draw.y.map((y, i) => y - mean[i]!);
  whiten(factor, residual);
  let log = logNorm;
  for (const z of residual) log -= (z * z) / 2;
  outcomes.forEach((chances, i) => (log += Math.log(chances[draw.outcomes[i]!]!)));
  return log;
}
