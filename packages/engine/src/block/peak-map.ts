import type { Coordinate } from "./coordinates";
import { climb, type Landscape, type Mode } from "./modes";

/** A map of (0, 1)^d onto coordinates. */
export interface CubeMap {
  /** Fills the coordinates. @returns ln of the map's Jacobian */
  place(u: Float64Array, c: Float64Array): number;
}

/**
 * Lays (0, 1)^d about a single peak, so that what has to be searched isn't the whole prior: bounded
 * coordinates are opened by a logistic (a logarithm where one side is infinite), and
 *
 *   y = centre + L t,   t_j = (2 u_j - 1) / sqrt(2 u_j (1 - u_j))
 *
 * with L L' the covariance at the peak: each t is Student's with two degrees of freedom, whose
 * tails reach all that the peak's own don't.
 *
 * @returns null where the climb leads nowhere
 */
export function mapAboutPeak(
  lnDensity: (c: Float64Array) => number,
  coordinates: readonly Coordinate[],
  peak: Mode,
): CubeMap | null {
  const size = coordinates.length;
  const c = new Float64Array(size);
  const opened = (y: Float64Array, into: Float64Array): number => {
    let ln = 0;
    for (let j = 0; j < size; j += 1) ln += open(coordinates[j]!, y[j]!, into, j);
    return ln;
  };
  const landscape: Landscape = {
    ln: (y) => {
      const ln = opened(y, c);
      return ln > -Infinity ? ln + lnDensity(c) : -Infinity;
    },
    lower: new Float64Array(size).fill(-Infinity),
    upper: new Float64Array(size).fill(Infinity),
    step: new Float64Array(size).fill(0.5),
  };
  const start = Float64Array.from(coordinates, (one, j) => closed(one, peak, j));
  const mode = climb(landscape, start);
  if (mode === null) return null;
  const t = new Float64Array(size);
  const y = new Float64Array(size);
  let lnScale = 0;
  for (let j = 0; j < size; j += 1) lnScale += Math.log(mode.scale[j * size + j]!);
  return {
    place: (u, into) => {
      let ln = lnScale;
      for (let j = 0; j < size; j += 1) {
        const spread = 2 * u[j]! * (1 - u[j]!);
        t[j] = (2 * u[j]! - 1) / Math.sqrt(spread);
        // dt/du = (2 + t^2)^(3/2).
        ln += 1.5 * Math.log(2 + t[j]! * t[j]!);
      }
      for (let i = 0; i < size; i += 1) {
        y[i] = mode.centre[i]!;
        for (let k = 0; k <= i; k += 1) y[i]! += mode.scale[i * size + k]! * t[k]!;
      }
      return ln + opened(y, into);
    },
  };
}

/** Writes c_j at y. @returns ln dc/dy */
function open({ lower, upper }: Coordinate, y: number, into: Float64Array, j: number): number {
  if (upper < Infinity) {
    const width = upper - lower;
    const share = 1 / (1 + Math.exp(-y));
    into[j] = lower + width * share;
    // ln share + ln (1 - share), without cancellation on either side.
    return Math.log(width) - Math.abs(y) - 2 * Math.log1p(Math.exp(-Math.abs(y)));
  }
  if (lower > -Infinity) {
    into[j] = lower + Math.exp(y);
    return y;
  }
  into[j] = y;
  return 0;
}

/** y at the peak; half a width inside where the peak is at a bound. */
function closed({ lower, upper }: Coordinate, { centre, scale }: Mode, j: number): number {
  const size = centre.length;
  const width = Math.hypot(...scale.subarray(j * size, j * size + j + 1));
  const c = centre[j]!;
  if (upper < Infinity) {
    const whole = upper - lower;
    const margin = Math.min(width / 2, whole / 4);
    const inside = Math.min(Math.max(c, lower + margin), upper - margin);
    return Math.log((inside - lower) / (upper - inside));
  }
  return lower > -Infinity ? Math.log(Math.max(c - lower, width / 2)) : c;
}
