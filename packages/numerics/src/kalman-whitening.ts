import { NumericsError } from "./numerics-error";

export interface SmoothNoise {
  /** One per row, in any order; equal ones allowed. */
  x: ArrayLike<number>;
  /** The row's own variance, > 0. */
  variance: ArrayLike<number>;
  /** The smooth part's standard deviation, >= 0. */
  sd: number;
  /** Its correlation length, > 0, in units of x. */
  length: number;
  /** Each as long as x; transformed in place, rows staying where they are. */
  columns: readonly Float64Array[];
}

/**
 * Whitens columns whose rows have the covariance
 *
 *   C = diag(variance) + sd^2 exp(-|x_i - x_j| / length),
 *
 * so that the product of two whitened columns is a' C^-1 b. The smooth part is a Markov process, so
 * the Kalman filter does it in O(N) a column: each row becomes its innovation over that one's
 * standard deviation. In the filter's update P variance / (P + variance) nothing cancels, whatever
 * the length.
 *
 * @returns ln |C|
 * @throws {NumericsError} `out-of-domain`
 * Accuracy: each whitened entry to a few eps of the largest value in its column over its own noise's
 * sd, ln |C| to N eps; for any length and any sd.
 * Source: Rasmussen & Williams, Gaussian Processes for Machine Learning (2006), B.2; Sarkka, Bayesian
 * Filtering and Smoothing (2013), 4.3 and 12.3; Kelly et al., Astrophys. J. 788 (2014) 33.
 * Reference values: fixtures/kalman-whitening.json (mpmath).
 */
export function whitenSmooth({ x, variance, sd, length, columns }: SmoothNoise): number {
  checkNoise({ x, variance, sd, length, columns });
  const order = Array.from({ length: x.length }, (_, i) => i).sort((a, b) => x[a]! - x[b]!);
  const means = new Float64Array(columns.length);
  const smooth = sd * sd;
  let uncertainty = smooth;
  let previous = order.length > 0 ? x[order[0]!]! : 0;
  let logDeterminant = 0;
  for (const i of order) {
    const step = (x[i]! - previous) / length;
    const kept = Math.exp(-step);
    uncertainty = uncertainty * kept * kept - smooth * Math.expm1(-2 * step);
    const total = uncertainty + variance[i]!;
    const gain = uncertainty / total;
    const deviation = Math.sqrt(total);
    for (let c = 0; c < columns.length; c += 1) {
      const predicted = means[c]! * kept;
      const innovation = columns[c]![i]! - predicted;
      means[c] = predicted + gain * innovation;
      columns[c]![i] = innovation / deviation;
    }
    logDeterminant += Math.log(total);
    uncertainty = gain * variance[i]!;
    previous = x[i]!;
  }
  return logDeterminant;
}

function checkNoise({ x, variance, sd, length }: SmoothNoise): void {
  if (!(sd >= 0 && sd < Infinity && length > 0)) {
    throw new NumericsError(
      "out-of-domain",
      `a smooth tolerance needs sd >= 0 and length > 0; found sd = ${sd}, length = ${length}`,
    );
  }
  for (let i = 0; i < x.length; i += 1) {
    if (!Number.isFinite(x[i])) {
      throw new NumericsError("out-of-domain", `row ${i} has no finite place: ${x[i]!}`);
    }
    if (!(variance[i]! > 0 && variance[i]! < Infinity)) {
      throw new NumericsError(
        "out-of-domain",
        `a measurement's variance has to be > 0; row ${i} has ${variance[i]!}`,
      );
    }
  }
}
