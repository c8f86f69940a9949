import type { CubeMode, CubeOptions } from "@weighhouse/numerics/cube-integral";
import { integrateUnitCube } from "@weighhouse/numerics/log-integral";
import { LN_SQRT_2PI, normalCdf, truncatedNormalQuantile } from "@weighhouse/numerics/normal";
import type { Axis, Coordinate } from "./coordinates";
import { climb, type Mode } from "./modes";
import { mapAboutPeak, type CubeMap } from "./peak-map";

export interface Integral {
  ln: number;
  error: number;
  /** n points, each an array of coordinates, and their posterior weights, which add up to 1. */
  points: Float64Array[];
  weights: Float64Array;
  /** Up to three dimensions: the posterior probability that one coordinate is at most c. */
  cdf: ((axis: number, c: number) => number) | null;
}

export interface IntegralOptions {
  /** Coordinates; those where the density is 0 lead nowhere. */
  starts: readonly Float64Array[];
  seed: number;
  /** How many kinks the density may have that no `breaks` tell of. */
  kinks?: number;
  /** Whether its kinks lie across the axes. */
  rough?: boolean;
  /** Where two or three dimensions take more evaluations than this they are sampled instead. */
  calls?: number;
}

/** Thousands of small kinks can't each be found, nor do they have to be. */
function relativeOnLine(kinks: number, rough: boolean): number {
  return rough ? 1e-9 : Math.min(Math.max(1e-11, kinks * 1e-13), 1e-9);
}

/** So many widths about every peak have to be well inside of an axis. */
const MARGIN = 9;
/**
 * An infinite axis is laid out about the highest peak so that the others, and the prior's middle,
 * are within this many standard deviations: further out (0, 1) runs out of numbers.
 */
const REACH = 5;
/** Up to so many dimensions there are rules that need no map about the peak. */
const FEW = 3;

/**
 * ln of the integral of exp(lnDensity) over the coordinates, priors included in it.
 *
 * Peaks are climbed to from the starts and handed to the integrator. Infinite axes are laid onto
 * (0, 1) by a normal distribution wide enough for the peaks, whatever their priors.
 *
 */
export function integrate(
  lnDensity: (c: Float64Array) => number,
  coordinates: readonly Coordinate[],
  { starts, seed, kinks = 0, rough = false, calls = Infinity }: IntegralOptions,
): Integral {
  const size = coordinates.length;
  const modes = peaksOf(lnDensity, coordinates, starts);
  const about = () => (modes.length === 1 ? mapAboutPeak(lnDensity, coordinates, modes[0]!) : null);
  const axes = coordinates.map((one, j) => axisOf(one, modes, j));
  const map: CubeMap = {
    place: (u, c) => {
      let ln = 0;
      for (let j = 0; j < size; j += 1) ln += axes[j]!.place(u[j]!, c, j);
      return ln;
    },
  };
  const breaks = coordinates.map((one, j) => {
    const places = one.breaks.map((at) => axes[j]!.toUnit(at)).filter((u) => u > 0 && u < 1);
    return [...new Set(places)].sort((a, b) => a - b);
  });
  if (size > FEW) return overCube(lnDensity, about() ?? map, { size, seed });
  const relative = size === 1 ? relativeOnLine(kinks, rough) : rough ? 1e-6 : undefined;
  const cubeModes = modes.map((mode) => cubeMode(mode, axes));
  const options = {
    size,
    seed,
    modes: cubeModes,
    breaks,
    relative,
    calls: size > 1 ? calls : Infinity,
  };
  try {
    const found = overCube(lnDensity, map, options);
    const { cdf } = found;
    return { ...found, cdf: cdf && ((axis, at) => cdf(axis, axes[axis]!.toUnit(at))) };
  } catch (error) {
    if (!(error instanceof CallsSpent)) throw error;
    // Sampling begins at four dimensions: those that are over change nothing.
    return overCube(lnDensity, about() ?? map, { size, seed, spare: FEW + 1 - size });
  }
}

/** Thrown through the integrator when a rule that doesn't converge has had its calls. */
class CallsSpent extends Error {}

function overCube(
  lnDensity: (c: Float64Array) => number,
  map: CubeMap,
  {
    size,
    spare = 0,
    calls = Infinity,
    ...options
  }: CubeOptions & {
    size: number;
    spare?: number;
    calls?: number;
  },
): Integral {
  const c = new Float64Array(size);
  let spent = 0;
  const onCube = (u: Float64Array) => {
    spent += 1;
    if (spent > calls) throw new CallsSpent();
    const ln = map.place(u, c);
    return ln > -Infinity ? ln + lnDensity(c) : -Infinity;
  };
  const { ln, error, nodes, cdf } = integrateUnitCube(onCube, size + spare, options);
  const whole = size + spare;
  return {
    ln,
    error,
    points: Array.from(nodes.lnWeights, (_, n) => {
      const point = new Float64Array(size);
      map.place(nodes.points.subarray(n * whole, n * whole + size), point);
      return point;
    }),
    weights: Float64Array.from(nodes.lnWeights, Math.exp),
    cdf: cdf ?? null,
  };
}

function peaksOf(
  lnDensity: (c: Float64Array) => number,
  coordinates: readonly Coordinate[],
  starts: readonly Float64Array[],
): Mode[] {
  const landscape = {
    ln: lnDensity,
    lower: Float64Array.from(coordinates, ({ lower }) => lower),
    upper: Float64Array.from(coordinates, ({ upper }) => upper),
    step: Float64Array.from(coordinates, ({ lower, upper }) => Math.min((upper - lower) / 10, 0.5)),
  };
  const modes: Mode[] = [];
  for (const start of starts) {
    const mode = climb(landscape, start);
    if (mode === null) continue;
    if (!modes.some((one) => isSame(one, mode))) modes.push(mode);
  }
  modes.sort((a, b) => b.height - a.height);
  return modes.filter(({ height }) => height > modes[0]!.height - 60);
}

/** Whether two peaks are the same: centres within a standard deviation of the first. */
function isSame(one: Mode, other: Mode): boolean {
  const size = one.centre.length;
  let squares = 0;
  const y = new Float64Array(size);
  for (let i = 0; i < size; i += 1) {
    let rest = other.centre[i]! - one.centre[i]!;
    for (let k = 0; k < i; k += 1) rest -= one.scale[i * size + k]! * y[k]!;
    y[i] = rest / one.scale[i * size + i]!;
    squares += y[i]! * y[i]!;
  }
  return squares < 1;
}

function axisOf({ lower, upper }: Coordinate, modes: readonly Mode[], j: number): Axis {
  if (lower > -Infinity && upper < Infinity) {
    const width = upper - lower;
    const ln = Math.log(width);
    return {
      place: (u, into, at) => {
        into[at] = lower + u * width;
        return ln;
      },
      toUnit: (c) => (c - lower) / width,
    };
  }
  const half = lower > -Infinity;
  const origin = half ? lower : (modes[0]?.centre[j] ?? 0);
  let spread = Math.max(1, Math.abs(origin) / REACH);
  for (const mode of modes) {
    const distance = Math.abs(mode.centre[j]! - origin) + MARGIN * widthOf(mode, j);
    spread = Math.max(spread, distance / REACH);
  }
  // The share of the normal that the bounds keep: all, or the upper half from 0 on.
  const lnScale = Math.log(spread) + LN_SQRT_2PI - (half ? Math.LN2 : 0);
  return {
    place: (u, into, at) => {
      const z = truncatedNormalQuantile(half ? 0 : -Infinity, Infinity, u);
      into[at] = origin + spread * z;
      return (z * z) / 2 + lnScale;
    },
    toUnit: (c) => {
      const p = normalCdf((c - origin) / spread);
      return half ? 2 * p - 1 : p;
    },
  };
}

function widthOf({ scale, centre }: Mode, j: number): number {
  const size = centre.length;
  return Math.hypot(...scale.subarray(j * size, j * size + j + 1));
}

/** A peak in units of the cube, its widths scaled by du/dc there. */
function cubeMode({ centre, scale }: Mode, axes: readonly Axis[]): CubeMode {
  const size = centre.length;
  const units = Float64Array.from(axes, (axis, j) => axis.toUnit(centre[j]!));
  const placed = new Float64Array(size);
  const shrunk = Float64Array.from(scale, (value, n) => {
    const i = Math.floor(n / size);
    const u = Math.min(Math.max(units[i]!, 1e-300), 1 - 1e-16);
    return value * Math.exp(-axes[i]!.place(u, placed, i));
  });
  return { centre: units, scale: shrunk };
}
