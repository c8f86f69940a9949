/** A peak of the density: centre, and the lower-triangular Cholesky factor of its covariance. */
export interface Peak {
  centre: Float64Array;
  /** d x d, row by row, diagonal above 0. */
  factor: Float64Array;
}

/** A box of the cube seen from a peak. */
export interface Chart {
  peak: Peak;
  lower: Float64Array;
  upper: Float64Array;
}

/** The map's stretch in standard deviations: normal peaks then need the fewest nodes. */
const STRETCH = 4;

/**
 * Maps v in [0, 1]^d onto the chart's box so that the peak fills most of it:
 *
 *   u_i = m_i + s w / sqrt(1 - w^2),   s = 4 A_ii,   w linear in v_i
 *   m_i = c_i + sum_(j < i) A_ij (u_j - m_j) / A_jj
 *
 * m_i is the peak's mean of u_i given those before it, so that a peak however correlated comes out
 * upright, and bounds stay bounds.
 *
 * @param v d numbers in [0, 1]
 * @param u is given the d coordinates
 * @returns ln of the Jacobian, ln |du / dv|
 */
export function mapFromChart(
  { peak, lower, upper }: Chart,
  v: Float64Array,
  u: Float64Array,
): number {
  let jacobian = 1;
  for (let i = 0; i < u.length; i += 1) {
    const mean = conditionalMean(peak, u, i);
    const scale = STRETCH * peak.factor[i * (u.length + 1)]!;
    const low = rolledUp((lower[i]! - mean) / scale);
    const range = rolledUp((upper[i]! - mean) / scale) - low;
    const w = low + range * v[i]!;
    const x = mean + (scale * w) / Math.sqrt(1 - w * w);
    u[i] = x > lower[i]! ? Math.min(x, upper[i]!) : lower[i]!;
    const t = (u[i]! - mean) / scale;
    jacobian *= range * scale * (1 + t * t) ** 1.5;
  }
  return Math.log(jacobian);
}

/** The v_i at which coordinate i becomes x, given the coordinates before it; 0 to 1. */
export function chartPlace(
  { peak, lower, upper }: Chart,
  u: Float64Array,
  at: { axis: number; x: number },
): number {
  const { axis, x } = at;
  if (x <= lower[axis]!) return 0;
  if (x >= upper[axis]!) return 1;
  const mean = conditionalMean(peak, u, axis);
  const scale = STRETCH * peak.factor[axis * (u.length + 1)]!;
  const low = rolledUp((lower[axis]! - mean) / scale);
  const high = rolledUp((upper[axis]! - mean) / scale);
  return high > low ? (rolledUp((x - mean) / scale) - low) / (high - low) : 0;
}

function rolledUp(t: number): number {
  return t / Math.sqrt(1 + t * t);
}

/** |A^-1 (u - c)|^2. */
export function squareFromPeak({ centre, factor }: Peak, u: Float64Array, z: Float64Array): number {
  const dimension = centre.length;
  let square = 0;
  for (let i = 0; i < dimension; i += 1) {
    let rest = u[i]! - centre[i]!;
    for (let j = 0; j < i; j += 1) rest -= factor[i * dimension + j]! * z[j]!;
    z[i] = rest / factor[i * dimension + i]!;
    square += z[i]! * z[i]!;
  }
  return square;
}

function conditionalMean({ centre, factor }: Peak, u: Float64Array, i: number): number {
  const dimension = centre.length;
  if (i === 0) return centre[0]!;
  const z0 = (u[0]! - centre[0]!) / factor[0]!;
  if (i === 1) return centre[1]! + factor[dimension]! * z0;
  const z1 = (u[1]! - centre[1]! - factor[dimension]! * z0) / factor[dimension + 1]!;
  return centre[2]! + factor[2 * dimension]! * z0 + factor[2 * dimension + 1]! * z1;
}

/** The peak of the coordinates from the second on, the first being x. */
export function conditionalPeak({ centre, factor }: Peak, x: number): Peak {
  const dimension = centre.length;
  const z = (x - centre[0]!) / factor[0]!;
  const rest = Float64Array.from({ length: dimension - 1 }, (_, i) => i + 1);
  return {
    centre: rest.map((i) => centre[i]! + factor[i * dimension]! * z),
    factor: Float64Array.from({ length: (dimension - 1) ** 2 }, (_, k) => {
      const i = 1 + Math.floor(k / (dimension - 1));
      return factor[i * dimension + 1 + (k % (dimension - 1))]!;
    }),
  };
}
